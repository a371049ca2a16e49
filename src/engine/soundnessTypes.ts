/** What the soundness checks of METHODS 7 look at beyond the ledger: counts, of constant size. */

import type { ByVariant, ValueCount } from "./types.ts";

export interface SoundnessFacts {
  /** Enrolled units by the local day of their enrolment, earliest first; null in a log without time. */
  readonly days: readonly DayOfEnrolment[] | null;
  /** One a subgroup column, in plan order: its levels in the order of `facts.subgroups`. */
  readonly levels: readonly (readonly EndedUnits[])[];
  /**
   * One a line of the row ledger that can take an enrolling row (rejected, duplicate, the row filters), in its order: the
   * units that would be enrolled, by first variant, if this line and those after it took no row.
   */
  readonly beforeLines: readonly { readonly line: string; readonly byVariant: ByVariant }[];
  /** Units with a row that enrols them to a variant, of those that reach the row filters. */
  readonly enrolling: EnrollingRows;
  /**
   * Where the log has an event column and the plan no enrolment event: enrolled units whose enrolling row some metric's
   * `of` or `per` matches, and the commonest events of those rows. Else null.
   */
  readonly byMetricRows: { readonly units: number; readonly events: readonly ValueCount[] } | null;
  /** Analysed units not followed to the end, where the plan keeps them; else null. */
  readonly keptUnfollowed: ByVariant | null;
  /** Of filters that removed nothing, the commonest values of the columns that they look at. */
  readonly valuesOfFilters: readonly FilterValues[];
  /** One an entry of the log with rows, in plan order; empty in a log without time. */
  readonly sources: readonly SourceHours[];
  /** Runs of hours in which an arm has no row while others have, those with most rows of others first, at most 20. */
  readonly silences: readonly Silence[];
}

/** Units of one group by the line on which they end. */
export interface EndedUnits {
  /** One a unit line after unknown-variant, in the order of unitLines, by first variant. */
  readonly ended: readonly ByVariant[];
}
export interface DayOfEnrolment extends EndedUnits {
  /** Days since 1970-01-01. */
  readonly day: number;
}

/** By the variant that the row names; a unit counts once a variant. */
export interface EnrollingRows {
  readonly units: ByVariant;
  /** One a row filter, in plan order: units of which it took such a row. */
  readonly taken: readonly ByVariant[];
}

export interface FilterValues {
  readonly filter: string;
  readonly columns: readonly { readonly column: string; readonly values: readonly ValueCount[] }[];
}

/** Not rejected rows of one entry of the log, by hours of the epoch, over its span (DESIGN 4, rule 7). */
export interface SourceHours {
  /** Index into the plan's log. */
  readonly source: number;
  readonly outside: number;
  /** From the span's first row to its last, without a break. */
  readonly hours: readonly HourOfLog[];
}
/** When it starts on the plan's clock, and its rows. */
export interface HourOfLog {
  /** Days since 1970-01-01. */
  readonly day: number;
  /** 0 to 23. */
  readonly hour: number;
  readonly rows: number;
  /** Of these, rows of enrolled units, by their variant. */
  readonly byVariant: ByVariant;
}

export interface Silence {
  readonly source: number;
  readonly variant: number;
  /** Places in the source's hours, both inclusive. */
  readonly first: number;
  readonly last: number;
  /** Enrolled units of other variants with a row in these hours. */
  readonly others: number;
}
