import { mergedNames, type PlanChange } from "../../plan/index.ts";
import type { ReportJson } from "../json-types.ts";
import { type EarlierReport, firstPlanOf, type PreviousReport, runOf } from "../previous.ts";
import type { ChangesJson, EffectChange, FileChange, LineChange, Shown, StepsJson } from "./types.ts";

/** What a rerun knows beyond its own figures. */
export interface Rerun {
  readonly previous: PreviousReport;
  /** Since the previous report. */
  readonly planChanges: readonly PlanChange[];
  /** Since the first report: those that decide. */
  readonly ruleChanges: readonly PlanChange[];
  readonly steps: StepsJson | null;
}

type After = Omit<ReportJson, "changes">;

/** The new report against the one that it replaces. */
export function changesJson({ previous, planChanges, ruleChanges, steps }: Rerun, after: After): ChangesJson {
  const before = previous.report;
  return {
    run: runOf(before) + 1,
    replaces: previous.sha256,
    first: firstPlanOf(before),
    ...compared(before, after),
    plan: planChanges,
    rule: ruleChanges,
    steps,
  };
}

/** What can be said of any two reports of one experiment, whichever came first. */
export function compared(
  before: EarlierReport,
  after: EarlierReport | After,
): Pick<ChangesJson, "log" | "flow" | "effects" | "checks" | "conclusion"> {
  return {
    log: [
      ...files(before.provenance.inputs, after.provenance.inputs, false),
      ...files(before.provenance.lists, after.provenance.lists, true),
    ],
    flow: [...rowLines(before, after), ...unitLines(before, after)],
    effects: effectChanges(before.effects, after.effects),
    checks: checkChanges(before.checks, after.checks),
    conclusion: { before: told(before.conclusion), after: told(after.conclusion) },
  };
}

type Files = EarlierReport["provenance"]["inputs"];

function files(before: Readonly<Files>, after: readonly Files[number][], list: boolean): FileChange[] {
  const of = (files: readonly Files[number][], name: string) => {
    const found = files.find((file) => file.name === name);
    return found === undefined ? null : { bytes: found.bytes, sha256: found.sha256, rows: found.rows };
  };
  return (
    union(after, before, ({ name }) => name)
      .map((name) => ({ name, list, before: of(before, name), after: of(after, name) }))
      .filter((file) => file.before?.sha256 !== file.after?.sha256)
      // a list that only one of the plans names is that plan's change
      .filter((file) => !list || (file.before !== null && file.after !== null))
  );
}

function rowLines(before: EarlierReport, after: EarlierReport | After): LineChange[] {
  const [was, is] = [before.flow.rows, after.flow.rows];
  return union(is, was, ({ id }) => id).map((id) => {
    const [a, b] = [was.find((line) => line.id === id), is.find((line) => line.id === id)];
    return {
      of: "rows",
      id,
      line: b?.line ?? a?.line ?? id,
      before: a?.rows ?? null,
      after: b?.rows ?? null,
      byVariant: null,
    };
  });
}

function unitLines(before: EarlierReport, after: EarlierReport | After): LineChange[] {
  const [was, is] = [before.flow.units, after.flow.units];
  return union(is, was, ({ id }) => id).map((id) => {
    const [a, b] = [was.find((line) => line.id === id), is.find((line) => line.id === id)];
    const byVariant = { before: a?.byVariant ?? null, after: b?.byVariant ?? null };
    return {
      of: "units",
      id,
      line: b?.line ?? a?.line ?? id,
      before: a?.units ?? null,
      after: b?.units ?? null,
      byVariant: byVariant.before === null && byVariant.after === null ? null : byVariant,
    };
  });
}

type Effects = EarlierReport["effects"];

function effectChanges(before: Readonly<Effects>, after: readonly Effects[number][]): EffectChange[] {
  const key = ({ metric, variant }: Pick<Effects[number], "metric" | "variant">) => JSON.stringify([metric, variant]);
  return union(after, before, key).flatMap((one) => {
    const [was, is] = [before.find((effect) => key(effect) === one), after.find((effect) => key(effect) === one)];
    const either = is ?? was;
    if (either === undefined) return [];
    const { metric, variant, role } = either;
    return [{ metric, variant, role, before: was ? shownOf(was) : null, after: is ? shownOf(is) : null }];
  });
}

/** The contrast that decides: adjusted where there is one. */
function shownOf({ difference, relative, adjusted, zone, arms }: Effects[number]): Shown {
  const { estimate, low, high } = (adjusted ?? { difference }).difference;
  return {
    estimate,
    low,
    high,
    relative: adjusted === null ? relative : adjusted.relative,
    zone,
    units: { control: arms.control.units, variant: arms.variant.units },
    totals: { control: arms.control.total, variant: arms.variant.total },
  };
}

type Checks = EarlierReport["checks"];

function checkChanges(before: Readonly<Checks>, after: readonly Checks[number][]): ChangesJson["checks"] {
  const resultOf = (checks: readonly Checks[number][], id: string) =>
    checks.find((check) => check.id === id)?.result ?? null;
  return union(after, before, ({ id }) => id)
    .filter((id) => id !== "plan-changed") // of the rerun itself, not of the data
    .map((id) => ({ id, before: resultOf(before, id), after: resultOf(after, id) }))
    .filter((check) => check.before !== check.after);
}

function told({ decision, variant, sentence }: EarlierReport["conclusion"]) {
  return { decision, variant, sentence };
}

/** Keys of the first list, each that only the second has behind its neighbour there. */
function union<T>(first: readonly T[], second: readonly T[], key: (item: T) => string): readonly string[] {
  return mergedNames(first.map(key), second.map(key));
}
