import type { ByVariant, Facts } from "../../src/engine/types.ts";
import type { OracleQuantile } from "./quantile.ts";
import type { Cell } from "./where.ts";

/** One file of the log as text cells: what the oracle starts from. */
export interface RawFile {
  /** Its entry of the plan's `log`. */
  readonly source: number;
  readonly file: string;
  readonly header: readonly string[];
  readonly rows: readonly (readonly Cell[])[];
  /** Rows that are there but cannot be read, such as one with a cell too many. */
  readonly unreadable: number;
}

/** The ids of each `listed-in` filter, by the file's name in the plan. */
export type Lists = ReadonlyMap<string, ReadonlySet<string>>;

export type RejectReason = "no-unit" | "no-time" | "bad-time" | "not-a-number" | "out-of-range";

/** A row that could be read. Where it ends is in the ledger tables. */
export interface Row {
  readonly source: number;
  readonly unit: Cell;
  readonly eventId: Cell;
  readonly us: bigint | null;
  readonly event: Cell;
  readonly variant: Cell;
  /** Place in the plan's list of variants; -1 for one that the plan lacks, null where none is named. */
  readonly variantIndex: number | null;
  readonly cell: (column: string) => Cell;
  /** In 10^-9; null where the cell is missing. */
  readonly number: (column: string) => bigint | null;
  readonly rejected: RejectReason | null;
}

export type OracleFacts = Pick<
  Facts,
  | "enrolled"
  | "withRejected"
  | "withDuplicate"
  | "switched"
  | "duplicateIds"
  | "copiesThatDiffer"
  | "copiesOfOtherUnits"
  | "missingEvents"
  | "missingVariants"
  | "firstEnrolledUs"
  | "lastEnrolledUs"
  | "inIncidents"
  | "logEndUs"
  | "analysedByDay"
  | "subgroups"
  | "soundness"
>;

/** One analysed unit's value of a metric, in 10^-9, after the cap. */
export interface UnitValue {
  readonly unit: string;
  readonly variant: number;
  readonly bucket: number;
  readonly of: bigint;
  /** A ratio's denominator. */
  readonly per: bigint | null;
  /** The covariate; null where the plan adjusts for none, or the unit has no value of it. */
  readonly x: bigint | null;
}

/** What a unit did on each day since its enrolment, in 10^-9. */
export interface OracleSince {
  readonly days: number;
  readonly units: readonly {
    readonly unit: string;
    readonly variant: number;
    readonly of: readonly bigint[];
    readonly per: readonly bigint[] | null;
  }[];
}

export interface OracleMetric {
  readonly metric: string;
  /** Every row line, for the rows that `of` matches; sum in 10^-9, null where `of` takes no column. */
  readonly ledger: readonly { readonly id: string; readonly rows: number; readonly sum: bigint | null }[];
  readonly leftOut: ByVariant;
  readonly countedRows: number;
  readonly countedWithoutNumber: number;
  readonly cap: { readonly value: bigint; readonly units: ByVariant } | null;
  readonly values: readonly UnitValue[];
  /** Of a quantile, one an arm, at the critical value of the metric's intervals; null without values. */
  readonly quantile: readonly (OracleQuantile | null)[] | null;
  /** By day since enrolment; null where that is not told. */
  readonly since: OracleSince | null;
}

/** Where an analysed unit stands among days and levels. */
export interface OraclePlace {
  /** The local day of its enrolment; null without time. */
  readonly day: number | null;
  /** One a subgroup column: the place of its level in the facts. */
  readonly levels: readonly number[];
}

export interface OracleResult {
  readonly rowsRead: number;
  readonly rowLines: readonly { readonly id: string; readonly rows: number }[];
  readonly unitsSeen: number;
  readonly unitLines: readonly { readonly id: string; readonly units: number; readonly byVariant: ByVariant | null }[];
  readonly facts: OracleFacts;
  readonly metrics: readonly OracleMetric[];
  /** By unit. */
  readonly places: ReadonlyMap<string, OraclePlace>;
}
