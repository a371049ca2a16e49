/**
 * What an engine gives back: the reduction of a log under a plan. Constant size: nothing here grows with rows or units,
 * except the rejected rows, which go to a file.
 */

import type { SoundnessFacts } from "./soundnessTypes.ts";

/** Counts per variant, in plan order. */
export type ByVariant = readonly number[];

export interface Reduction {
  readonly engine: { readonly name: string; readonly version: string };
  readonly inputs: readonly InputFile[];
  /** Files named by `listed-in`, with the number of ids read. */
  readonly lists: readonly InputFile[];
  readonly rowsRead: number;
  /** Every ledger line of DESIGN 7, in order, also with 0; the rows add up to rowsRead. */
  readonly rowLines: readonly { readonly id: string; readonly rows: number }[];
  readonly unitsSeen: number;
  /** The units add up to unitsSeen. byVariant is null for not-enrolled and unknown-variant. */
  readonly unitLines: readonly { readonly id: string; readonly units: number; readonly byVariant: ByVariant | null }[];
  readonly facts: Facts;
  /** One a metric, in plan order. */
  readonly metrics: readonly MetricCells[];
  /** The same over other groups of the analysed units than buckets; one a metric, in plan order. */
  readonly groups: readonly MetricGroups[];
  /** The account of each metric's rows, in plan order. */
  readonly metricLedgers: readonly MetricLedger[];
  /** Rejected rows by reason, most frequent first. */
  readonly rejectReasons: readonly { readonly reason: string; readonly rows: number }[];
}

/**
 * The lines of the row ledger, all of them, for the rows that a metric's `of` (of a ratio the numerator) matches by event and
 * where. The last one is what the metric counted. A rejected row is on its line as far as its event and columns could be
 * read; a record that was not cut into cells is in no metric's account.
 */
export interface MetricLedger {
  readonly metric: string;
  readonly lines: readonly {
    readonly id: string;
    readonly rows: number;
    /** Exact sum of the column that the metric takes, in 10^-9, over rows that hold a number; null where it takes none. */
    readonly sum: bigint | null;
  }[];
}

export interface InputFile {
  /** Path relative to the plan's folder, with forward slashes. */
  readonly name: string;
  readonly bytes: number;
  readonly sha256: string;
  readonly rows: number;
}

/** What the soundness checks look at, beyond the ledger. */
export interface Facts {
  /** Enrolled units (past the line unknown-variant) by first variant, switched ones included. */
  readonly enrolled: ByVariant;
  /** Of the enrolled, units with a rejected row, with a duplicate row, and that switched. */
  readonly withRejected: ByVariant;
  readonly withDuplicate: ByVariant;
  readonly switched: ByVariant;
  /** Event ids of which copies differ in a column that the plan names, and of which copies differ in the unit. */
  readonly duplicateIds: number;
  readonly copiesThatDiffer: number;
  readonly copiesOfOtherUnits: number;
  /** Whether some entry of the log has an event-id. */
  readonly hasEventId: boolean;
  /** Values that rows name, commonest first, at most 200 each; null columns are not values. */
  readonly events: readonly ValueCount[];
  readonly variants: readonly ValueCount[];
  /** Plan variants and events that no row has, whatever the length of the lists above. */
  readonly missingEvents: readonly string[];
  readonly missingVariants: readonly string[];
  /** First and last enrolment of a counted unit, and the end of the log (DESIGN 4, rule 7); null without time. */
  readonly firstEnrolledUs: bigint | null;
  readonly lastEnrolledUs: bigint | null;
  readonly logEndUs: bigint | null;
  /** Analysed units by the local day of their enrolment (days since 1970-01-01), days without one left out; [] without time. */
  readonly analysedByDay: readonly { readonly day: number; readonly units: ByVariant }[];
  /** One a subgroup column of the plan, in plan order. */
  readonly subgroups: readonly SubgroupColumn[];
  readonly soundness: SoundnessFacts;
  /** Analysed units that enrolled in each incident of the plan, in its order. */
  readonly inIncidents: readonly ByVariant[];
  /** First and last enrolment of a unit that is counted, or will be once it is followed to the end; null without time. */
  readonly firstKeptUs: bigint | null;
  readonly lastKeptUs: bigint | null;
  /** The same of those that were asked afterwards: no check looks at them. */
  readonly subgroupsAfterwards: readonly SubgroupColumn[];
}

/** The levels of a subgroup column, by a unit's value on its enrolling row; a level's place here is its code in cells. */
export interface SubgroupColumn {
  readonly column: string;
  /** The 12 largest by enrolled units, ties by text; then the rest as one; then the units whose value is missing. */
  readonly levels: readonly { readonly level: Level; readonly enrolled: ByVariant }[];
}
/** A kind and not a text: a log may well have a value "other". */
export type Level =
  | { readonly kind: "value"; readonly text: string }
  | { readonly kind: "rest"; readonly levels: number }
  | { readonly kind: "missing" };
export interface ValueCount {
  readonly value: string;
  readonly rows: number;
}

/** One metric's cells over the analysed units. */
export interface MetricCells {
  readonly metric: string;
  /** Per variant: analysed units without a value (only where a unit without rows is left out). */
  readonly leftOut: ByVariant;
  /** Per variant: units whose value is not 0. */
  readonly notZero: ByVariant;
  /** Counted rows (in follow-up, of analysed units) that hold no number; they add nothing. */
  readonly countedRows: number;
  readonly countedWithoutNumber: number;
  /** The cap's value as an exact decimal, and the units it changed per variant. */
  readonly cap: { readonly value: string; readonly units: ByVariant } | null;
  /** The numerator, or the metric's only part, after the cap. */
  readonly of: CellTable;
  readonly ratio: { readonly per: CellTable; readonly score: ScoreTable; readonly joint: JointTable } | null;
  /** x of the adjusted contrast, over the units that have one and a value; joint sums of (value, x) over the same. */
  readonly covariate: { readonly x: CellTable; readonly joint: JointTable } | null;
  /** Units by the size of their value, after the cap, of a ratio the numerator's; null for a share, which has two values. */
  readonly sizes: SizeTable | null;
  /** The same metric under other reasonable choices (METHODS 6), as far as they differ from the plan's. */
  readonly choices: readonly ChoiceCells[];
  /**
   * Per variant the unit with the smallest and the one with the largest value, of a ratio the smallest and the largest
   * score, of several the one with the smallest pair; x is its ratio's denominator or its covariate.
   */
  readonly ends: readonly (UnitEnds | null)[];
  /** Only of cells that were kept without their buckets: what the buckets had said, one a pair of arms. */
  readonly kept?: readonly KeptBuckets[] | undefined;
}

/** What is known of two arms whose buckets are gone. */
export interface KeptBuckets {
  readonly control: number;
  readonly variant: number;
  readonly isAdjusted: boolean;
  /** How far the arms look like one distribution, 1 to 0. */
  readonly alike: number;
  /** What was drawn from the buckets, as stats has it, for which critical value; null where nothing was asked for. */
  readonly drawn: { readonly critical: number; readonly found: unknown } | null;
}

/** One metric's cells by what divides the analysed units. Quantiles have none. */
export interface MetricGroups {
  readonly metric: string;
  /** By the local day of enrolment, as days since 1970-01-01; null without time. */
  readonly byDay: GroupCells | null;
  /** One a subgroup column, those asked afterwards last; the group is the place of the level in `Facts`. */
  readonly byLevel: readonly GroupCells[];
  /** By day since enrolment; null where a metric cannot be told day by day. */
  readonly sinceEnrolment: SinceEnrolment | null;
}

/**
 * A metric by day since enrolment, days of 24 hours, over the analysed units that were followed to the end, of each every
 * day. A unit's day is the number or the sum of the day's rows, of a proportion and of `days` whether there was one; under
 * a cap what the day adds to the unit's capped value. All are measured against 0.
 */
export interface SinceEnrolment {
  /** Whole days of follow-up; the group is 0 to days - 1. */
  readonly days: number;
  readonly groups: GroupCells;
  /** Sums of each unit's sum over d of (2 d - (days - 1)) y_d, in one group; null for a ratio. */
  readonly slope: CellTable | null;
  /**
   * Of a ratio the same of its scores (a - R b) / mean(b), R and mean(b) of the unit's arm on that day; an arm without a
   * ratio on some day has none.
   */
  readonly scores: ScoreTable | null;
}

/** Cells whose `bucket` is the group; joint sums of a ratio's two parts, or of a value and its covariate. */
export interface GroupCells {
  readonly of: CellTable;
  readonly joint: JointTable | null;
}

export type OtherCells =
  | "no-cap"
  | "cap-0.99"
  | "cap-0.999"
  | "other-way-in-two-variants"
  | "any-follow-up"
  | "without-first-day"
  | `without-incident:${string}`;

/**
 * A metric under one other choice, one row an arm; log(1 + x) are doubles without an exact total. Smallest and largest are
 * bounds: the unit that held one may be among those left out.
 */
export type ChoiceCells =
  | { readonly choice: OtherCells; readonly of: CellTable; readonly joint: JointTable | null }
  | { readonly choice: "log"; readonly logged: ScoreTable };

/**
 * Units per variant, sign and size of a value: columns of equal length, a row where there is a unit. Exact counts, and
 * as many rows as the values have sizes, whatever the number of units.
 */
export interface SizeTable {
  readonly variant: readonly number[];
  /** -1, 0, 1. */
  readonly sign: readonly number[];
  /** 4 k + j with 2^k (1 + j / 4) <= |x| < 2^k (1 + (j + 1) / 4), j in 0..3, of the double nearest to x; null for 0. */
  readonly quarter: readonly (number | null)[];
  readonly units: readonly number[];
}

/** In 10^-9 of the unit of each; x is null where there is none. */
export interface UnitEnds {
  readonly smallest: { readonly value: bigint; readonly x: bigint | null };
  readonly largest: { readonly value: bigint; readonly x: bigint | null };
}

/**
 * Joint power sums of two values (y, x) per variant and bucket, over the units that have both: S_jk is the sum of u^j w^k,
 * u = (y - pivot) / scale of y, w likewise of x, in two integers as above.
 */
export interface JointTable {
  readonly pivots: readonly [string, string];
  readonly scales: readonly [number, number];
  readonly variant: readonly number[];
  readonly bucket: readonly number[];
  readonly n: readonly number[];
  readonly high10: readonly bigint[];
  readonly high01: readonly bigint[];
  readonly high20: readonly bigint[];
  readonly high11: readonly bigint[];
  readonly high02: readonly bigint[];
  readonly low10: readonly bigint[];
  readonly low01: readonly bigint[];
  readonly low20: readonly bigint[];
  readonly low11: readonly bigint[];
  readonly low02: readonly bigint[];
  /** Exact sums of y and of x over these units, in 10^-9. */
  readonly totalY: readonly bigint[];
  readonly totalX: readonly bigint[];
}

/**
 * Cells of one metric part per variant and bucket: columns of equal length. u = (x - pivot) / scale;
 * S_k = (sum of high_k) 2^-60 + (sum of low_k) 2^-120, k = 1..4 (DESIGN 5).
 */
export interface CellTable {
  /** Exact decimal text with up to 9 places. */
  readonly pivot: string;
  /** A power of two. */
  readonly scale: number;
  readonly variant: readonly number[];
  readonly bucket: readonly number[];
  readonly n: readonly number[];
  readonly high1: readonly bigint[];
  readonly high2: readonly bigint[];
  readonly high3: readonly bigint[];
  readonly high4: readonly bigint[];
  readonly low1: readonly bigint[];
  readonly low2: readonly bigint[];
  readonly low3: readonly bigint[];
  readonly low4: readonly bigint[];
  /** Exact sum of x, in 10^-9 of the metric's unit. */
  readonly total: readonly bigint[];
  /** Smallest and largest x, in 10^-9 of the metric's unit. */
  readonly smallest: readonly bigint[];
  readonly largest: readonly bigint[];
}

/**
 * Cells of a ratio's score d = (a - R b) / mean(b), R and mean(b) of the unit's own arm. No pivot: the arm's mean of d
 * is 0 by construction; the score that readers see is d + R.
 */
export interface ScoreTable {
  readonly scale: number;
  readonly variant: readonly number[];
  readonly bucket: readonly number[];
  readonly n: readonly number[];
  readonly high1: readonly bigint[];
  readonly high2: readonly bigint[];
  readonly high3: readonly bigint[];
  readonly high4: readonly bigint[];
  readonly low1: readonly bigint[];
  readonly low2: readonly bigint[];
  readonly low3: readonly bigint[];
  readonly low4: readonly bigint[];
  /** Smallest and largest d, in the metric's unit. */
  readonly smallest: readonly number[];
  readonly largest: readonly number[];
}
