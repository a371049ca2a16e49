import type { Plan } from "../../plan/index.ts";
import { count, planPercent, plural } from "../../words/index.ts";
import type { ChangesJson, EffectChange } from "../changes/types.ts";
import { movedText, ordinal, saidBefore, shownTexts, withVariant } from "../changes/words.ts";
import { type Drawing, draw } from "../charts/draw.ts";
import { type ForestAxis, type ForestRow, forestAxis, forestScale, forestStrip } from "../charts/forest.ts";
import { theme } from "../charts/theme.ts";
import { NONE } from "../effect-text.ts";
import { shortFingerprint } from "../history.ts";
import { titleOf } from "./checks.ts";
import { percentLabel } from "./forest.ts";
import { type StepsTable, stepsTable } from "./steps.ts";

/** Section 2, on a rerun only: what is not as it was. */
export interface ChangesSection {
  /** Of the section; null in a document of its own. */
  readonly number: number | null;
  readonly intro: string;
  readonly conclusion: string;
  readonly before: string;
  readonly plan: readonly PlanRow[];
  readonly planNote: string;
  /** What decides, against the first report. */
  readonly rule: readonly PlanRow[];
  readonly ruleNote: string;
  readonly log: readonly FileRow[];
  readonly logNote: string;
  readonly many: string;
  readonly units: readonly LineRow[];
  readonly rows: readonly LineRow[];
  readonly figure: BeforeAfter;
  readonly steps: StepsTable | null;
  readonly checks: readonly { readonly title: string; readonly before: string; readonly after: string }[];
}
interface PlanRow {
  readonly place: string;
  readonly before: string;
  readonly after: string;
  readonly decides: boolean;
}
interface FileRow {
  readonly name: string;
  readonly before: string;
  readonly after: string;
}
interface LineRow {
  readonly line: string;
  readonly before: string;
  readonly after: string;
  readonly by: string;
}
/** Each estimate twice, one above the other, on one axis. */
export interface BeforeAfter {
  readonly title: string;
  readonly reading: string;
  readonly rows: readonly BeforeAfterRow[];
  readonly axis: Drawing | null;
}
export interface BeforeAfterRow {
  readonly metric: string;
  /** ' with "map"', or nothing. */
  readonly variant: string;
  readonly run: string;
  readonly isNow: boolean;
  readonly drawing: Drawing | null;
  readonly estimate: string;
  readonly interval: string;
}

export async function changesSection(
  changes: ChangesJson,
  plan: Plan,
  before = `${ordinal(changes.run - 1)} run`,
): Promise<ChangesSection> {
  const { run, replaces, log, flow, checks } = changes;
  return {
    number: 2,
    intro: `This is the ${ordinal(run)} run of this report. It replaces the one with the fingerprint ${shortFingerprint(replaces)}, which is kept in history/.`,
    conclusion: saidBefore(changes),
    before,
    plan: changes.plan.map(planRow),
    planNote: planNote(changes),
    rule: changes.rule.map(planRow),
    ruleNote: ruleNote(changes),
    log: log.map(({ name, before: was, after: is }) => ({ name, before: fileText(was), after: fileText(is) })),
    logNote: log.length === 0 ? "Every file is the same, byte for byte." : "",
    many: plan.unitCalled.many,
    units: flow.filter(({ of }) => of === "units").map(lineRow),
    rows: flow.filter(({ of }) => of === "rows").map(lineRow),
    figure: await beforeAfter(changes, plan, before),
    steps: stepsTable(changes, plan),
    checks: checks.map(({ id, before: was, after: is }) => ({
      title: titleOf(id),
      before: OUTCOMES[was ?? "none"] ?? "",
      after: OUTCOMES[is ?? "none"] ?? "",
    })),
  };
}

const OUTCOMES: Readonly<Record<string, string>> = {
  pass: "passed",
  caution: "caution",
  fail: "failed",
  none: "not made",
};

function planRow({ place, before, after, decides }: ChangesJson["plan"][number]): PlanRow {
  return { place, before: before ?? NONE, after: after ?? NONE, decides };
}

function planNote({ plan, replaces }: ChangesJson): string {
  if (plan.length > 0) return "";
  return `The plan says the same as that of ${shortFingerprint(replaces)}, comments and spelling aside.`;
}

function ruleNote({ rule, run }: ChangesJson): string {
  if (rule.length === 0) {
    return "The rule is that of the first run: the same deciding measures, worthwhile effects, limits, confidence, allocation, enrolment and follow-up.";
  }
  const since = run > 2 ? " These are all changes of the rule since the first run." : "";
  return `What decides was changed after a result had been seen: ${plural(rule.length, "place", "places")} of the plan.${since}`;
}

function fileText(file: ChangesJson["log"][number]["before"]): string {
  return file === null ? "not there" : `${plural(file.rows, "row", "rows")}, ${shortFingerprint(file.sha256)}`;
}

function lineRow(change: ChangesJson["flow"][number]): LineRow {
  const text = (n: number | null) => (n === null ? NONE : count(n));
  return { line: change.line, before: text(change.before), after: text(change.after), by: movedText(change) };
}

async function beforeAfter({ effects }: ChangesJson, plan: Plan, before: string): Promise<BeforeAfter> {
  const texts = effects.map((effect) => {
    const metric = plan.metrics.find(({ name }) => name === effect.metric) ?? null;
    return { effect, ...shownTexts(effect, metric) };
  });
  const known = texts.flatMap(({ effect, ...of }) =>
    [of.before.drawn, of.after.drawn].flatMap((drawn) => (drawn === null ? [] : [rowOf(drawn, effect, true)])),
  );
  const axis = forestAxis(known);
  const rows: BeforeAfterRow[] = [];
  for (const [i, text] of texts.entries()) {
    for (const isNow of [false, true]) {
      const own = isNow ? text.after : text.before;
      rows.push({
        metric: text.effect.metric,
        variant: withVariant(text.effect, plan),
        run: isNow ? "now" : before,
        isNow,
        drawing:
          own.drawn === null ? null : await strip(rowOf(own.drawn, text.effect, isNow), axis, `change-${i + 1}`, isNow),
        estimate: own.estimate,
        interval: own.interval === "" ? "" : `(${own.interval})`,
      });
    }
  }
  return {
    title: "Each estimate before and after",
    reading: `Each difference from the control, ${planPercent(plan.decision.confidence)} interval now, in percent of the control\u2019s level. Upper line of each pair, dashed: the ${before}. Lower line: now.`,
    rows,
    axis:
      known.length === 0
        ? null
        : await draw(forestScale(axis, percentLabel), "change-axis", {
            title: "Axis of the drawing: difference from the control in percent of its level",
            description: `From ${percentLabel(axis.low)} to ${percentLabel(axis.high)}; the long upright is no difference.`,
          }),
  };
}

function strip(row: ForestRow, axis: ForestAxis, id: string, isNow: boolean): Promise<Drawing> {
  return draw(forestStrip(row, axis), `${id}-${isNow ? "now" : "before"}`, null);
}

function rowOf(relative: ForestRow["relative"], { role }: EffectChange, isNow: boolean): ForestRow {
  return {
    relative,
    mark: null,
    decides: role !== "secondary",
    style: isNow ? { dash: [1, 0], fill: theme.ink } : { dash: [4, 3], fill: theme.paper },
  };
}
