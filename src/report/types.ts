import type { Check } from "../checks/types.ts";
import type { Accrual, Choices, Conclusion, DaysSince, Effect, Subgroup } from "../decision/index.ts";
import type { Reduction } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import type { Rerun } from "./changes/changes.ts";
import type { ReportJson } from "./json-types.ts";

/** Everything a report is made of: it reads no clock, no file of the log and no path of the machine. */
export interface ReportInputs {
  readonly plan: Plan;
  /** The plan file's text, verbatim. */
  readonly planText: string;
  readonly planSha256: string;
  /** Of closeout. */
  readonly version: string;
  readonly reduction: Reduction;
  readonly checks: readonly Check[];
  /** One a metric and variant, in plan order. */
  readonly effects: readonly Effect[];
  /** One an effect, in their order. */
  readonly choices: readonly Choices[];
  /** Of every effect that has one, in their order. */
  readonly accruals: readonly Accrual[];
  readonly daysSince: readonly DaysSince[];
  readonly subgroups: readonly Subgroup[];
  readonly afterwards: Afterwards;
  readonly conclusion: Conclusion;
  /** The log was not read: the figures are of cells that an earlier report had kept. */
  readonly fromCells?: boolean | undefined;
  /** Of cells.json beside the report. */
  readonly cellsSha256?: string | undefined;
  /** Of a report that replaces an earlier one. */
  readonly rerun?: Rerun | undefined;
}

/** What was asked after the test began: it is told apart, and nothing else looks at it. */
export interface Afterwards {
  /** The planned metrics by further columns. */
  readonly subgroups: readonly Subgroup[];
  /** Further metrics, from a reading of their own; null where none was asked for. */
  readonly metrics: { readonly plan: Plan; readonly reduction: Reduction; readonly effects: readonly Effect[] } | null;
}

export interface ReportFiles {
  readonly json: ReportJson;
  readonly html: string;
  /** What is written into the report's folder. */
  readonly files: readonly ReportFile[];
  /** Made only when they are asked for: every figure as a file, page one alone, one line for a log of decisions. */
  readonly extras: () => readonly ExtraFile[];
  /** The conclusion and a short table for stdout, plain lines without colour. */
  readonly terminal: (paths: TerminalPaths) => string;
}
export interface ReportFile {
  readonly name: "report.html" | "report.json" | "effects.csv" | "summary.md" | "cells.json";
  readonly text: string;
}
/** `figures/….svg`, `page-one.html`, `decision.csv`. */
export interface ExtraFile {
  readonly name: string;
  readonly text: string;
}
/** Where the reader finds the files, as the terminal is to print it. */
export interface TerminalPaths {
  readonly report: string;
  readonly summary: string;
}
