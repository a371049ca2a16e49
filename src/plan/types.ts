/**
 * The plan as the other rooms use it: defaults filled in, names in the code's style, exact numbers kept as text.
 * The YAML's own shape is the schema in schema.ts; nothing but plan/ sees that.
 */

/** A plain decimal as text with percent resolved: "0.999", "500", "-1.5". Exact: a float would round it. */
export type DecimalText = string;

export interface Plan {
  readonly experiment: string;
  readonly question: string;
  readonly unitCalled: { readonly one: string; readonly many: string };
  readonly log: readonly LogSource[];
  /** IANA name; local times and days are read in it. */
  readonly timezone: string;
  readonly enrolment: Enrolment;
  /** In plan order; exactly one is the control. */
  readonly variants: readonly Variant[];
  readonly followUp: { readonly days: number; readonly incomplete: "exclude" | "keep" } | null;
  readonly metrics: readonly Metric[];
  readonly filters: readonly Filter[];
  /** Columns whose value on its enrolling row divides the units; in plan order, each once. */
  readonly subgroups: readonly string[];
  readonly askedAfterwards: AskedAfterwards;
  readonly decision: Decision;
  readonly plannedUnits: number | null;
  /** Null: one analysis, at the end. */
  readonly looks: Looks | null;
  /** In plan order; without effect on who is counted. */
  readonly incidents: readonly Incident[];
  /** How many units are expected to enrol in a month, all variants together. */
  readonly forecast: { readonly unitsPerMonth: number } | null;
  /** Where the rule was kept before the start, and its fingerprint (seal.ts). */
  readonly registered: { readonly on: string; readonly where: string | null; readonly fingerprint: string } | null;
  readonly texts: PlanTexts;
  /**
   * Every column of the log that the plan names, other than as time, event or variant, in the order of first mention
   * in the YAML text (unit and event-id columns among them), those that only incidents name last. It ends the canonical
   * order of rows (DESIGN 4, rule 3).
   */
  readonly columns: readonly string[];
  /** Of these, the ones whose values must be numbers: summed, or taken max, min, first or last of, or adjusted for. */
  readonly numericColumns: readonly string[];
}

/** What was asked after the test began: reported apart, and without effect on anything that the plan asked before. */
export interface AskedAfterwards {
  readonly subgroups: readonly string[];
  /** Secondary metrics, all of them. */
  readonly metrics: readonly Metric[];
  /** The columns that these name, as in the plan. */
  readonly columns: readonly string[];
  readonly numericColumns: readonly string[];
}

/** One entry of `log`. */
export interface LogSource {
  /** Paths and globs as written, relative to the plan's folder. */
  readonly files: readonly string[];
  readonly columns: {
    readonly unit: string;
    readonly time: string | null;
    readonly event: string | null;
    readonly variant: string | null;
    readonly eventId: string | null;
  };
}

export interface Enrolment {
  readonly event: string | null;
  /** Microseconds since the epoch; from is inclusive, before exclusive. */
  readonly fromUs: bigint | null;
  readonly beforeUs: bigint | null;
  /** As written in the plan, for the reader. */
  readonly fromText: string | null;
  readonly beforeText: string | null;
  readonly inTwoVariants: "first" | "exclude";
}

export interface Variant {
  readonly name: string;
  readonly what: string | null;
  readonly isControl: boolean;
  readonly allocation: number;
}

export type Summary = "mean" | "proportion" | "quantile" | "ratio-of-totals";
export type Role = "primary" | "secondary" | "guardrail";

/** An effect size in the plan: a share of the control's level (0.05 = 5%), or in the metric's own unit. */
export type Amount =
  | { readonly kind: "relative"; readonly value: number }
  | { readonly kind: "absolute"; readonly value: number };

export interface Metric {
  readonly name: string;
  readonly role: Role;
  readonly summary: Summary;
  readonly of: Part;
  /** The denominator of a ratio of totals, else null. */
  readonly per: Part | null;
  /** Which quantile, in (0, 1); null unless the summary is one. */
  readonly quantile: DecimalText | null;
  /** The unit of measurement, for the reader: "kr". */
  readonly unitOfMeasure: string | null;
  readonly goodIs: "higher" | "lower";
  /** Primary only; null: any gain. */
  readonly worthwhile: Amount | null;
  readonly expected: Amount | null;
  /** Guardrail only, and there never null. */
  readonly margin: Amount | null;
  readonly cap:
    | { readonly kind: "quantile"; readonly q: DecimalText }
    | { readonly kind: "at"; readonly at: DecimalText }
    | null;
  /** A covariate of means and proportions: `of` in the days before enrolment, or a column's value at enrolment. */
  readonly adjustFor:
    | { readonly kind: "days-before"; readonly days: number }
    | { readonly kind: "column"; readonly column: string }
    | null;
  readonly withoutRows: "zero" | "leave-out";
}

/** What is taken of a unit's rows. A part with neither event nor where counts every row. */
export interface Part {
  readonly event: string | null;
  readonly where: Where;
  readonly aggregate: Aggregate;
}
export type Aggregate =
  | { readonly kind: "count" }
  | { readonly kind: "days" }
  | { readonly kind: "sum" | "max" | "min" | "first" | "last"; readonly column: string };

/** All tests must hold. An empty list holds for every row. */
export type Where = readonly ColumnTest[];
export type ColumnTest = { readonly column: string } & (
  | { readonly kind: "in" | "not"; readonly values: readonly Scalar[] }
  | { readonly kind: "above" | "below" | "at-least" | "at-most"; readonly value: DecimalText }
  | { readonly kind: "missing"; readonly value: boolean }
  | { readonly kind: "matches"; readonly patterns: readonly string[] }
);
/** A number in a `where` keeps its digits as the plan's text has them. */
export type Scalar =
  | { readonly kind: "text"; readonly text: string }
  | { readonly kind: "number"; readonly value: DecimalText }
  | { readonly kind: "boolean"; readonly value: boolean };

export type Filter =
  | { readonly name: string; readonly why: string | null; readonly drop: "rows"; readonly where: Where }
  | {
      readonly name: string;
      readonly why: string | null;
      readonly drop: "units";
      readonly when: "at-enrolment" | "ever";
      readonly where: Where;
    }
  | { readonly name: string; readonly why: string | null; readonly drop: "units"; readonly listedIn: string };

export interface Decision {
  readonly confidence: number;
  readonly power: number;
  readonly adoptWhen: "shown-better" | "shown-worthwhile";
  /** How many primary metrics must pass. */
  readonly primaries: "all" | "any";
  /** Which interval decides where several could. */
  readonly interval: "normal" | "skew-corrected";
}

/** Interim looks that the plan states beforehand. */
export interface Looks {
  /** Shares of the planned size, rising, the last 1. */
  readonly planned: readonly number[];
  /** Which of them this analysis is, from 1. */
  readonly at: number;
  readonly spending: "obrien-fleming" | "pocock";
  /** Analysed of planned units, where the plan states a size and the log was read; the plan alone does not know it. */
  readonly reached: number | null;
}

/** Something that happened while units enrolled: one other choice leaves out those enrolled then and there. */
export interface Incident {
  readonly name: string;
  /** What happened, for the reader. */
  readonly what: string | null;
  /** Microseconds since the epoch; from is inclusive, before exclusive. */
  readonly fromUs: bigint;
  readonly beforeUs: bigint;
  /** As written in the plan. */
  readonly fromText: string;
  readonly beforeText: string;
  /** Asked of the enrolling row. */
  readonly where: Where;
}

/** Text for the reader, without effect on any number. */
export interface PlanTexts {
  readonly ended: string | null;
  readonly owner: string | null;
  readonly link: string | null;
  readonly limits: string | null;
  readonly notes: string | null;
  readonly decided: {
    readonly what: string;
    readonly by: string | null;
    readonly on: string | null;
    readonly because: string | null;
  } | null;
}

/**
 * Something wrong in the plan, or between the plan and the log, as data; words are made in problems.ts.
 * `path` leads to the place in the YAML (["metrics", 0, "of", "sum"]); `at` says whether the key or the value is meant.
 */
export interface Problem {
  readonly path: readonly (string | number)[];
  readonly at: "key" | "value";
  /** What is wrong, one or two sentences, remedy included. */
  readonly message: string;
  /** The nearest known word, where one is near. */
  readonly nearest?: string | undefined;
  /** A further line for the reader, such as the list of columns the log has. */
  readonly context?: string | undefined;
  /** Start and end in the text, where no path leads: a fault of the YAML itself, the second of two equal keys. */
  readonly span?: readonly [number, number] | undefined;
}
