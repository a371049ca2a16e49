import type { CheckOutcome } from "../../checks/types.ts";
import type { DecisionWord, Zone } from "../../decision/index.ts";
import type { PlanChange, Role } from "../../plan/index.ts";
import type { Relative } from "../../stats/types.ts";

/** `changes` of report.json: what is not as it was in the report that this one replaces; null in a first report. */
export interface ChangesJson {
  /** 2 is the first rerun. */
  readonly run: number;
  /** SHA-256 of the report.json that this one replaces. */
  readonly replaces: string;
  /** The plan of the first report, to which the rule is held. */
  readonly first: { readonly sha256: string; readonly text: string };
  /** Since the report that this one replaces. */
  readonly plan: readonly PlanChange[];
  /** Since the first report: what decides and is not as it was when no result had been seen. */
  readonly rule: readonly PlanChange[];
  readonly log: readonly FileChange[];
  /** Every ledger line of either report. */
  readonly flow: readonly LineChange[];
  readonly effects: readonly EffectChange[];
  /** Checks whose result is another; null where the check was not made. */
  readonly checks: readonly {
    readonly id: string;
    readonly before: CheckOutcome | null;
    readonly after: CheckOutcome | null;
  }[];
  readonly conclusion: { readonly before: ConclusionJson; readonly after: ConclusionJson };
  /** Which change did it; null where there is only one. */
  readonly steps: StepsJson | null;
}

export interface ConclusionJson {
  readonly decision: DecisionWord;
  readonly variant: string | null;
  readonly sentence: string;
}

export interface FileChange {
  readonly name: string;
  readonly list: boolean;
  readonly before: FileJson | null;
  readonly after: FileJson | null;
}
export interface FileJson {
  readonly bytes: number;
  readonly sha256: string;
  readonly rows: number;
}

export interface LineChange {
  readonly of: "rows" | "units";
  readonly id: string;
  readonly line: string;
  /** Null where that report has no such line. */
  readonly before: number | null;
  readonly after: number | null;
  /** Of units, by variant; null where the line is not counted so. */
  readonly byVariant: {
    readonly before: Readonly<Record<string, number>> | null;
    readonly after: Readonly<Record<string, number>> | null;
  } | null;
}

/** The contrast that decides. */
export interface EffectChange {
  readonly metric: string;
  readonly variant: string;
  readonly role: Role;
  readonly before: Shown | null;
  readonly after: Shown | null;
}
export interface Shown {
  readonly estimate: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly relative: Relative | null;
  readonly zone: Zone;
  readonly units: { readonly control: number; readonly variant: number };
  readonly totals: { readonly control: number | null; readonly variant: number | null };
}

/** The earlier plan on this log, then each change alone, and one added to the other in the order of the plan. */
export interface StepsJson {
  readonly start: StepJson;
  readonly changes: readonly {
    readonly change: string;
    /** Null where the plan with this change alone is none. */
    readonly alone: StepJson | null;
    readonly added: StepJson | null;
  }[];
}
export interface StepJson {
  readonly decision: DecisionWord;
  readonly variant: string | null;
  readonly analysed: Readonly<Record<string, number>>;
  readonly effects: readonly StepEffect[];
}
export interface StepEffect {
  readonly metric: string;
  readonly variant: string;
  readonly estimate: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly relative: Relative | null;
}
