import type { Check } from "../../checks/types.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Plan, Role } from "../../plan/types.ts";
import type { CheckJson, FlowJson, ProvenanceJson } from "../json-types.ts";

/** check.json: what may be known of a test before its end. Nothing in it is a measure by variant. */
export interface BlindJson {
  readonly format: 1;
  readonly experiment: string;
  /** The plan's rule in sentences, and what it asks of each metric. */
  readonly rule: {
    readonly sentences: readonly string[];
    readonly metrics: readonly { readonly metric: string; readonly role: Role; readonly asked: string }[];
  };
  /** Days are of the plan's time zone, "2026-03-15"; null where not known. */
  readonly schedule: {
    readonly timezone: string;
    readonly logEnd: string | null;
    readonly enrolment: {
      readonly first: string | null;
      readonly last: string | null;
      /** The last day of the plan. */
      readonly plannedLast: string | null;
      readonly isOpen: boolean | null;
    };
    readonly units: {
      /** Counted, or that will be once followed to the end. */
      readonly enrolled: number;
      readonly followed: number | null;
      readonly planned: number | null;
      readonly byPlannedEnd: number | null;
    };
    readonly perDay: { readonly seen: number | null; readonly planned: number | null };
    readonly plannedSizeOn: string | null;
    readonly followUpCompleteOn: string | null;
    readonly sentences: readonly string[];
  };
  readonly flow: FlowJson;
  readonly checks: readonly CheckJson[];
  readonly withheld: readonly { readonly what: string; readonly why: string }[];
  readonly provenance: ProvenanceJson;
}

/** What a blind check is made of: no cells and no contrasts, so that none can be shown. */
export interface BlindInputs {
  readonly plan: Plan;
  readonly planText: string;
  readonly planSha256: string;
  readonly version: string;
  readonly reduction: Omit<Reduction, "metrics" | "groups">;
  readonly checks: readonly Check[];
}
