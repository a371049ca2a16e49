import type { CheckOutcome, Figure } from "../checks/types.ts";
import type { ChoiceName, DecisionWord, SubgroupLevel, Zone } from "../decision/index.ts";
import type { Level } from "../engine/types.ts";
import type { Role, Summary } from "../plan/types.ts";
import type { ArmFigures, Difference, Relative } from "../stats/types.ts";
import type { ChangesJson } from "./changes/types.ts";

/** report.json: the contract of DESIGN 7. Numbers carry 12 significant digits; what does not exist is null. */
export interface ReportJson {
  readonly format: 1;
  readonly experiment: string;
  readonly conclusion: {
    readonly decision: DecisionWord;
    readonly variant: string | null;
    readonly sentence: string;
    readonly reasons: readonly string[];
  };
  /** Null where the plan has no looks. */
  readonly looks: LooksJson | null;
  readonly flow: FlowJson;
  readonly checks: readonly CheckJson[];
  readonly effects: readonly EffectJson[];
  readonly subgroups: readonly SubgroupJson[];
  readonly accrual: readonly AccrualJson[];
  readonly sinceEnrolment: readonly SinceEnrolmentJson[];
  readonly sensitivity: readonly SensitivityJson[];
  /** What was asked after the test began; null where nothing was. */
  readonly askedAfterwards: {
    readonly effects: readonly EffectJson[];
    readonly subgroups: readonly SubgroupJson[];
  } | null;
  readonly changes: ChangesJson | null;
  readonly provenance: ReportProvenanceJson;
}

/** Interim looks as the plan states them, and this one. */
export interface LooksJson {
  /** Shares of the planned size. */
  readonly planned: readonly number[];
  readonly spending: "obrien-fleming" | "pocock";
  /** This look's number, from 1. */
  readonly at: number;
  /** Analysed of planned units; null where the plan states no size. */
  readonly reached: number | null;
  /** At which the looks so far count; this one's is the last. */
  readonly shares: readonly number[];
  /** Of each metric that decides or must not get worse, for each of its intervals. */
  readonly metrics: readonly {
    readonly metric: string;
    /** Two-sided, all looks together. */
    readonly alpha: number;
    /** The critical value of this look, on the normal's scale. */
    readonly boundary: number;
    /** Of alpha, by this look. */
    readonly spent: number;
  }[];
}

export interface FlowJson {
  readonly rowsRead: number;
  readonly rows: readonly { readonly id: string; readonly line: string; readonly rows: number }[];
  readonly unitsSeen: number;
  readonly units: readonly {
    readonly id: string;
    readonly line: string;
    readonly units: number;
    readonly byVariant: Readonly<Record<string, number>> | null;
  }[];
  readonly analysed: Readonly<Record<string, number>>;
  /** Of each metric's `of` the rows it matches, by the lines of `rows`; the last line is what it counted. */
  readonly metrics: readonly {
    readonly metric: string;
    readonly lines: readonly {
      readonly id: string;
      readonly line: string;
      readonly rows: number;
      readonly sum: number | null;
    }[];
  }[];
}

/** The check's own figures stand beside these keys. */
export type CheckJson = {
  readonly id: string;
  readonly result: CheckOutcome;
  readonly strong: boolean;
  readonly sentence: string;
  readonly remedy: string;
  readonly parts: readonly ({
    readonly about: string;
    readonly result: CheckOutcome;
    readonly sentence: string;
  } & { readonly [figure: string]: Figure })[];
} & { readonly [figure: string]: Figure };

export type DifferenceJson = Difference & { readonly pAdjusted: number | null };

/** One effect by the levels of a column, pointwise. */
export interface SubgroupJson {
  readonly column: string;
  readonly metric: string;
  readonly variant: string;
  readonly levels: readonly {
    /** The value; null for all values beyond the largest twelve (rest) and for units without one (missing). */
    readonly level: string | null;
    readonly kind: Level["kind"];
    /** Of both arms. */
    readonly units: number;
    readonly difference: DifferenceJson;
    readonly relative: Relative | null;
    readonly standing: SubgroupLevel["standing"];
    readonly sentence: string;
  }[];
  readonly heterogeneity: { readonly q: number; readonly df: number; readonly p: number } | null;
}

/** One effect as units enrolled, in the metric's unit; a day's row holds all enrolled up to it. */
export interface AccrualJson {
  readonly metric: string;
  readonly variant: string;
  /** The number of units at which the band is narrowest, and whether it is the plan's. */
  readonly band: { readonly units: number; readonly planned: boolean };
  readonly days: readonly {
    /** Local, YYYY-MM-DD. */
    readonly day: string;
    readonly units: number;
    readonly estimate: number | null;
    readonly low: number | null;
    readonly high: number | null;
    readonly bandLow: number | null;
    readonly bandHigh: number | null;
  }[];
}

/** One effect by day since enrolment, in the metric's unit, unadjusted and pointwise. */
export interface SinceEnrolmentJson {
  readonly metric: string;
  readonly variant: string;
  /** Of both arms, followed to the end. */
  readonly units: number;
  readonly days: readonly {
    /** 0 is the first day of 24 hours after enrolment. */
    readonly day: number;
    readonly estimate: number | null;
    readonly low: number | null;
    readonly high: number | null;
    readonly p: number | null;
  }[];
  /** Change of the difference from one day to the next. */
  readonly trend: {
    readonly estimate: number | null;
    readonly standardError: number | null;
    readonly low: number | null;
    readonly high: number | null;
    readonly p: number | null;
  };
}

export interface EffectJson {
  readonly metric: string;
  readonly role: Role;
  readonly summary: Summary;
  readonly variant: string;
  readonly control: string;
  readonly arms: { readonly control: ArmFigures; readonly variant: ArmFigures };
  readonly difference: DifferenceJson;
  readonly relative: Relative | null;
  /** Where not null, its difference decides. */
  readonly adjusted: {
    readonly difference: EffectJson["difference"];
    readonly relative: Relative | null;
    readonly theta: number;
    readonly varianceReduction: number;
  } | null;
  readonly zone: Zone;
  readonly power: { readonly detectable: number | null; readonly unitsForWorthwhile: number | null };
  /** Null for a quantile, and where an arm has no shape. */
  readonly normality: {
    readonly skew: number;
    readonly lowerTail: number;
    readonly upperTail: number;
    readonly own: { readonly lowerTail: number; readonly upperTail: number };
    readonly skewCorrected: { readonly low: number; readonly high: number };
    readonly unitsForTails: number | null;
    readonly unitsByRule: number;
    readonly largestShare: number | null;
  } | null;
}

/** One contrast under other reasonable choices, the plan's own ("as-planned") first. */
export interface SensitivityJson {
  readonly metric: string;
  readonly variant: string;
  readonly rows: readonly {
    readonly choice: ChoiceName;
    /** In the metric's unit; null where a choice says only whether there is a difference. */
    readonly estimate: number | null;
    readonly low: number | null;
    readonly high: number | null;
    readonly sign: -1 | 0 | 1 | null;
    readonly p: number | null;
    readonly agrees: boolean;
  }[];
}

export interface ProvenanceJson {
  readonly version: string;
  readonly plan: { readonly sha256: string; readonly text: string };
  readonly inputs: readonly {
    readonly name: string;
    readonly bytes: number;
    readonly sha256: string;
    readonly rows: number;
  }[];
  /** Lists of ids named by listed-in: they decide who counts, so their fingerprints are kept too. */
  readonly lists: readonly {
    readonly name: string;
    readonly bytes: number;
    readonly sha256: string;
    readonly rows: number;
  }[];
  readonly engine: { readonly name: string; readonly version: string };
}

/** A report keeps its cells too. */
export interface ReportProvenanceJson extends ProvenanceJson {
  /** SHA-256 of cells.json; null where none was kept. */
  readonly cells: string | null;
  /** Made from cells that an earlier report had kept, without reading the log. */
  readonly fromCells: boolean;
}
