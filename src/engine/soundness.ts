import type { Plan } from "../plan/index.ts";
import { count, type Engine, type Row, textOrNull } from "./engine.ts";
import { valuesOfFilters } from "./filterValues.ts";
import { type ArmHour, byRows, type HourCount, hoursOfSpan, type RowsOfUnits, silentRuns } from "./hours.ts";
import { FATE, type Layout, unitLineIds } from "./layout.ts";
import type { SourceSpan } from "./logEnd.ts";
import type {
  DayOfEnrolment,
  EndedUnits,
  EnrollingRows,
  Silence,
  SoundnessFacts,
  SourceHours,
} from "./soundnessTypes.ts";
import {
  type EnrolmentKey,
  endedByGroup,
  enrolledByMetricRows,
  enrolledWithout,
  enrollingUnits,
  fatesOfEnrolling,
  localDay,
  type Statement,
  sql,
  type TimeSpan,
  unfollowed,
  unitsInRuns,
} from "./sql/index.ts";
import type { ByVariant, Reduction } from "./types.ts";
import { clockHours, type DayRun, type Step } from "./zone.ts";

interface Stages {
  readonly layout: Layout;
  readonly key: EnrolmentKey;
  readonly days: readonly Step<DayRun>[];
  /** A unit's level of each subgroup column, over enrolments. */
  readonly levels: readonly Statement[];
  readonly spans: readonly SourceSpan[];
  /** Rows by hour; [] without time. */
  readonly hours: readonly HourCount[];
  readonly rowsOfUnits: readonly RowsOfUnits[];
  readonly span: TimeSpan;
  readonly logEndUs: bigint | null;
  readonly account: Pick<Reduction, "rowLines" | "unitLines">;
}

/** What the soundness checks look at beyond the ledger (METHODS 7). */
export async function soundness(
  plan: Plan,
  stages: Stages,
  enrolled: ByVariant,
  engine: Engine,
): Promise<SoundnessFacts> {
  const { layout } = stages;
  const fates = (await engine.query(fatesOfEnrolling())).map((row) => count(row, "fate")).sort((a, b) => a - b);
  return {
    days: layout.hasTime ? await enrolmentDays(plan, stages, engine) : null,
    levels: await endedByLevel(plan, stages, engine),
    beforeLines: await beforeLines(plan, layout, fates, enrolled, engine),
    enrolling: await enrollingRows(plan, layout, fates, enrolled, engine),
    byMetricRows: await byMetricRows(plan, stages, engine),
    keptUnfollowed: await keptUnfollowed(plan, stages, engine),
    valuesOfFilters: await valuesOfFilters(plan, layout, stages.account, engine),
    ...(layout.hasTime ? await hours(plan, stages, engine) : { sources: [], silences: [] }),
  };
}

async function enrolmentDays(plan: Plan, { days }: Stages, engine: Engine): Promise<DayOfEnrolment[]> {
  const rows = await engine.query(endedByGroup(localDay(sql`enrolled_us`, days), unknownLine(plan)));
  const found = [...new Set(rows.map((row) => count(row, "place")))].sort((a, b) => a - b);
  return found.map((day) => ({ day, ...endedUnits(plan, rows, day) }));
}

async function endedByLevel(plan: Plan, { levels }: Stages, engine: Engine): Promise<EndedUnits[][]> {
  const found: EndedUnits[][] = [];
  for (const code of levels) {
    const rows = await engine.query(endedByGroup(code, unknownLine(plan)));
    const places = [...new Set(rows.map((row) => count(row, "place")))].sort((a, b) => a - b);
    found.push(places.map((place) => endedUnits(plan, rows, place)));
  }
  return found;
}

/** One group's units by the lines after unknown-variant, and variant. */
function endedUnits(plan: Plan, rows: readonly Row[], place: number): EndedUnits {
  const own = rows.filter((row) => count(row, "place") === place);
  return {
    ended: unitLineIds(plan)
      .map((_, line) =>
        byVariant(
          plan,
          own.filter((row) => count(row, "line") === line),
        ),
      )
      .slice(unknownLine(plan) + 1),
  };
}

async function beforeLines(
  plan: Plan,
  layout: Layout,
  fates: readonly number[],
  enrolled: ByVariant,
  engine: Engine,
): Promise<SoundnessFacts["beforeLines"]> {
  const lines = ["rejected", "duplicate", ...layout.rowFilters.map(({ name }) => `filter:${name}`)];
  // A line that took no enrolling row leaves what the next one has.
  const rows = fates.length === 0 ? [] : await engine.query(enrolledWithout(plan, layout, fates));
  const touched = (fate: number) =>
    byVariant(
      plan,
      rows.filter((row) => count(row, "fate") === fate),
    );
  const inFact = touched(FATE.seen);
  return lines.map((line, i) => {
    const next = fates.find((fate) => fate >= FATE.rejected + i) ?? FATE.seen;
    const before = touched(next);
    return { line, byVariant: enrolled.map((units, v) => units + (before[v] ?? 0) - (inFact[v] ?? 0)) };
  });
}

async function enrollingRows(
  plan: Plan,
  layout: Layout,
  fates: readonly number[],
  enrolled: ByVariant,
  engine: Engine,
): Promise<EnrollingRows> {
  const none = layout.rowFilters.map(() => plan.variants.map(() => 0));
  if (!fates.some((fate) => fate >= FATE.firstFilter)) return { units: enrolled, taken: none };
  const rows = await engine.query(enrollingUnits(plan, layout));
  return { units: byVariant(plan, rows), taken: layout.rowFilters.map((_, i) => byVariant(plan, rows, `taken${i}`)) };
}

async function byMetricRows(
  plan: Plan,
  { layout, key }: Stages,
  engine: Engine,
): Promise<SoundnessFacts["byMetricRows"]> {
  if (plan.enrolment.event !== null || plan.log.every(({ columns }) => columns.event === null)) return null;
  const rows = await engine.query(enrolledByMetricRows(layout, key, unknownLine(plan)));
  const events = rows.flatMap((row) => {
    const value = textOrNull(row, "value");
    return value === null ? [] : [{ value, rows: count(row, "units") }];
  });
  return { units: rows.reduce((sum, row) => sum + count(row, "units"), 0), events: events.slice(0, EVENTS_SHOWN) };
}
const EVENTS_SHOWN = 5;

async function keptUnfollowed(plan: Plan, { logEndUs }: Stages, engine: Engine): Promise<ByVariant | null> {
  if (plan.followUp?.incomplete !== "keep" || logEndUs === null) return null;
  return byVariant(plan, await engine.query(unfollowed(plan, unitLineIds(plan).length - 1, logEndUs)));
}

const HOUR_US = 3_600_000_000n;
const SILENCES_KEPT = 20;

async function hours(
  plan: Plan,
  { spans, hours: all, rowsOfUnits, span }: Stages,
  engine: Engine,
): Promise<Pick<SoundnessFacts, "sources" | "silences">> {
  const arms = byArm(rowsOfUnits);
  const clock = clockHours(plan.timezone);
  const made = spans.map((span) => {
    const [first, last] = [hourOf(span.firstUs), hourOf(span.lastUs)];
    const isWithin = ({ source, hour }: HourCount) => source === span.source && hour >= first && hour <= last;
    const own = arms.filter(isWithin);
    const source: SourceHours = {
      source: span.source,
      outside: span.outside,
      hours: hoursOfSpan(all.filter(isWithin), own, plan.variants.length, first, last, clock),
    };
    return { source, first, own, runs: silentRuns(own) };
  });
  const runs = made
    .flatMap((one) => one.runs)
    .sort(byRows)
    .slice(0, SILENCES_KEPT);
  const counted = runs.length === 0 ? [] : await engine.query(unitsInRuns(runs, span, unknownLine(plan)));
  const silences = runs.map((run, r): Silence => {
    const start = made.find(({ source }) => source.source === run.source)?.first ?? 0;
    const row = counted.find((found) => count(found, "run") === r);
    return {
      source: run.source,
      variant: run.variant,
      first: run.first - start,
      last: run.last - start,
      others: row === undefined ? 0 : count(row, "units"),
    };
  });
  return { sources: made.map(({ source }) => source), silences };
}

/** Whatever their place. */
function byArm(rowsOfUnits: readonly RowsOfUnits[]): ArmHour[] {
  const arms = new Map<string, ArmHour>();
  for (const { source, hour, variant, rows } of rowsOfUnits) {
    const key = `${source}/${hour}/${variant}`;
    arms.set(key, { source, hour, variant, rows: rows + (arms.get(key)?.rows ?? 0) });
  }
  return [...arms.values()];
}

/** The hour of the epoch in which an instant lies; times before it count down. */
const hourOf = (us: bigint): number => Number((us - (((us % HOUR_US) + HOUR_US) % HOUR_US)) / HOUR_US);

const unknownLine = (plan: Plan): number => unitLineIds(plan).indexOf("unknown-variant");

function byVariant(plan: Plan, rows: readonly Row[], column = "units"): number[] {
  return plan.variants.map((_, v) =>
    rows.filter((row) => Number(row.variant) === v).reduce((sum, row) => sum + count(row, column), 0),
  );
}
