import { covariateInWords, type Effect, lookSentences } from "../decision/index.ts";
import type { Plan } from "../plan/types.ts";
import { count, list, planPercent, plural } from "../words/index.ts";
import type { ChangesJson } from "./changes/types.ts";
import { saidBefore, whatChanged } from "./changes/words.ts";
import { effectText, verdictText } from "./effect-text.ts";
import { controlOf } from "./plan-words.ts";
import { answers, findings } from "./sections/decision.ts";
import { labelled, printable, wrapped } from "./terminal-lines.ts";
import type { ReportInputs, TerminalPaths } from "./types.ts";

/** The conclusion and a short table, plain lines. Colour, if any, is the command line's. */
export function terminalText(inputs: ReportInputs, paths: TerminalPaths, changes: ChangesJson | null = null): string {
  const { plan, effects, conclusion, reduction } = inputs;
  const table =
    conclusion.decision === "undecidable" || effects.length === 0 ? [] : [...effectTable(effects, plan), ""];
  const adjusted = adjustedText(effects, plan);
  const notes = answers(inputs);
  const [data] = notes;
  const counted = reduction.unitLines.find((line) => line.id === "analysed")?.units ?? 0;
  return [
    ...wrapped(plan.experiment),
    "",
    ...wrapped(conclusion.sentence),
    ...[...findings(inputs), ...lookSentences(plan, conclusion)].flatMap((sentence) => wrapped(sentence)),
    "",
    ...table,
    ...(table.length === 0 || adjusted === "" ? [] : labelled("Adjusted", adjusted)),
    ...labelled("Data", data?.answer ?? ""),
    ...labelled(
      "Counted",
      `${count(counted)} of ${plural(reduction.unitsSeen, plan.unitCalled.one, plan.unitCalled.many)}; all ${count(reduction.rowsRead)} rows accounted for`,
    ),
    ...(changes === null ? [] : labelled("Before", saidBefore(changes))),
    ...(changes === null ? [] : labelled("Changed", whatChanged(changes, plan))),
    ...labelled("Report", paths.report),
    ...labelled("To paste", paths.summary),
  ]
    .map((line) => line.trimEnd())
    .join("\n");
}

/** "Booked and Fare per visitor for the same in the 14 days before enrolment": which figures of the table are adjusted; "" if none is. */
function adjustedText(effects: readonly Effect[], { metrics }: Plan): string {
  const adjusted = metrics.filter(({ name }) => effects.some((e) => e.metric === name && e.adjusted !== null));
  const covariates = new Set(adjusted.map(covariateInWords));
  return [...covariates]
    .map((covariate) => {
      const names = adjusted.filter((metric) => covariateInWords(metric) === covariate).map(({ name }) => name);
      return `${list(names)} for ${covariate}`;
    })
    .join("; ");
}

/** Each variant has a table of its own, so that its level stands under its name; all tables share their columns. */
function effectTable(effects: readonly Effect[], plan: Plan): string[] {
  const control = controlOf(plan).name;
  const others = plan.variants.filter((variant) => !variant.isControl);
  const tables = others.map(({ name }) => [
    ["", control, name, "difference", `${planPercent(plan.decision.confidence)} interval`, ""].map(cellText),
    ...effects.filter((effect) => effect.variant === name).map((effect) => effectCells(effect, plan)),
  ]);
  const lines = aligned(tables.flat());
  return tables.flatMap((table, t) => {
    const from = tables.slice(0, t).reduce((rows, before) => rows + before.length, 0);
    return [...(t === 0 ? [] : [""]), ...lines.slice(from, from + table.length)];
  });
}

function effectCells(effect: Effect, plan: Plan): string[] {
  const { levels, levelsUnit, shown } = effectText(effect, plan);
  const [before = "", after = ""] = levels.map((level) => `${level} ${levelsUnit}`.trimEnd());
  return [effect.metric, before, after, shown.estimate, shown.interval, verdictText(effect, plan)].map(cellText);
}

const MOST_CELL = 32;

/** A long name is cut, so that the figures beside it stay on the screen; the report has it whole. */
function cellText(text: string): string {
  const letters = [...printable(text)];
  return letters.length <= MOST_CELL ? letters.join("") : `${letters.slice(0, MOST_CELL - 1).join("")}\u2026`;
}

/** Words to the left, figures to the right; columns as wide as their widest cell. */
function aligned(rows: readonly (readonly string[])[]): string[] {
  const columns = Math.max(...rows.map((row) => row.length));
  const widths = Array.from({ length: columns }, (_, c) => Math.max(...rows.map((row) => [...(row[c] ?? "")].length)));
  return rows.map((row) =>
    row
      .map((cell, c) => (c === 0 || c >= columns - 2 ? cell.padEnd(widths[c] ?? 0) : cell.padStart(widths[c] ?? 0)))
      .join("   "),
  );
}
