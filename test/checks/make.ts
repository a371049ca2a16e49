import type { SoundnessFacts } from "../../src/engine/soundnessTypes.ts";
import type { Facts, MetricCells, Reduction } from "../../src/engine/types.ts";
import type { Filter, Metric, Plan } from "../../src/plan/types.ts";

/** A plan with two variants, half and half, and one proportion that decides; `changes` replace whole keys. */
export function planOf(changes: Partial<Plan> = {}): Plan {
  return {
    experiment: "Fare calendar on the search page",
    question: "Does a month of fares at a glance raise bookings?",
    unitCalled: { one: "visitor", many: "visitors" },
    log: [
      {
        files: ["data/*.csv"],
        columns: { unit: "visitor", time: "at", event: "event", variant: "arm", eventId: "id" },
      },
    ],
    timezone: "Europe/Oslo",
    enrolment: {
      event: "search_opened",
      fromUs: null,
      beforeUs: null,
      fromText: null,
      beforeText: null,
      inTwoVariants: "first",
    },
    variants: variantsOf({ list: 1, calendar: 1 }),
    followUp: null,
    metrics: [metricOf({ name: "Booked", role: "primary" })],
    filters: [],
    subgroups: [],
    askedAfterwards: { subgroups: [], metrics: [], columns: [], numericColumns: [] },
    decision: { confidence: 0.95, power: 0.8, adoptWhen: "shown-better", primaries: "all", interval: "normal" },
    plannedUnits: null,
    looks: null,
    incidents: [],
    forecast: null,
    registered: null,
    texts: { ended: null, owner: null, link: null, limits: null, notes: null, decided: null },
    columns: [],
    numericColumns: [],
    ...changes,
  };
}

/** Variants with their allocation; the first is the control. */
export function variantsOf(allocation: Readonly<Record<string, number>>): Plan["variants"] {
  return Object.entries(allocation).map(([name, share], i) => ({
    name,
    what: null,
    isControl: i === 0,
    allocation: share,
  }));
}

export function metricOf(changes: Partial<Metric> & Pick<Metric, "name">): Metric {
  return {
    role: "secondary",
    summary: "proportion",
    of: { event: "booking", where: [], aggregate: { kind: "count" } },
    per: null,
    quantile: null,
    unitOfMeasure: null,
    goodIs: "higher",
    worthwhile: null,
    expected: null,
    margin: null,
    cap: null,
    adjustFor: null,
    withoutRows: "zero",
    ...changes,
  };
}

export function rowFilter(name: string): Filter {
  return { name, why: null, drop: "rows", where: [] };
}
export function unitFilter(name: string, when: "at-enrolment" | "ever" = "at-enrolment"): Filter {
  return { name, why: null, drop: "units", when, where: [] };
}

/** What a log did under a plan, in a few numbers. Everything that is not said is 0. */
export interface LogShape {
  /** Enrolled units by first variant, switched ones included. */
  readonly enrolled?: readonly number[];
  /** Of these, how many end on a line before `analysed`: switched, filter:NAME, follow-up. */
  readonly ended?: Readonly<Record<string, readonly number[]>>;
  readonly unknownVariant?: number;
  readonly rowsRead?: number;
  /** Rows on a line of the ledger: rejected, duplicate, filter:NAME. The rest end in-follow-up. */
  readonly rows?: Readonly<Record<string, number>>;
  readonly rejectReasons?: Reduction["rejectReasons"];
  /** Analysed units without a value, by metric. */
  readonly leftOut?: Readonly<Record<string, readonly number[]>>;
  readonly facts?: Partial<Omit<Facts, "enrolled" | "soundness">>;
  readonly soundness?: Partial<SoundnessFacts>;
}

/** A reduction whose ledgers add up as the engine's do. */
export function reductionOf(plan: Plan, shape: LogShape = {}): Reduction {
  const none = plan.variants.map(() => 0);
  const enrolled = shape.enrolled ?? plan.variants.map(() => 1000);
  const unitLines = [
    { id: "not-enrolled", units: 0, byVariant: null },
    { id: "outside-enrolment", units: 0, byVariant: none },
    { id: "unknown-variant", units: shape.unknownVariant ?? 0, byVariant: null },
    ...exitLines(plan).map((id) => line(id, shape.ended?.[id] ?? none)),
  ];
  for (const id of Object.keys(shape.ended ?? {})) {
    if (!unitLines.some((known) => known.id === id)) throw new Error(`this plan has no line ${id}`);
  }
  const left = enrolled.map((n, i) => n - total(Object.values(shape.ended ?? {}).map((counts) => counts[i] ?? 0)));
  const rowsRead = shape.rowsRead ?? 10_000;
  const rowLines = rowLinesOf(plan).map((id) => ({ id, rows: shape.rows?.[id] ?? 0 }));
  return {
    engine: { name: "none", version: "0" },
    inputs: [],
    lists: [],
    rowsRead,
    rowLines: [...rowLines, { id: "in-follow-up", rows: rowsRead - total(rowLines.map(({ rows }) => rows)) }],
    unitsSeen: total(enrolled) + (shape.unknownVariant ?? 0),
    unitLines: [...unitLines, line("analysed", left)],
    facts: {
      enrolled,
      withRejected: none,
      withDuplicate: none,
      switched: shape.ended?.switched ?? none,
      duplicateIds: 0,
      copiesThatDiffer: 0,
      copiesOfOtherUnits: 0,
      hasEventId: true,
      events: [
        { value: "search_opened", rows: 6000 },
        { value: "booking", rows: 700 },
      ],
      variants: plan.variants.map(({ name }) => ({ value: name, rows: 3000 })),
      missingEvents: [],
      missingVariants: [],
      firstEnrolledUs: null,
      lastEnrolledUs: null,
      inIncidents: plan.incidents.map(() => plan.variants.map(() => 0)),
      logEndUs: null,
      analysedByDay: [],
      subgroups: [],
      firstKeptUs: null,
      lastKeptUs: null,
      subgroupsAfterwards: [],
      ...shape.facts,
      soundness: { ...soundnessOf(plan, enrolled), ...shape.soundness },
    },
    metrics: plan.metrics.map(({ name }) => metricCells(name, shape.leftOut?.[name] ?? none)),
    groups: plan.metrics.map(({ name }) => ({ metric: name, byDay: null, byLevel: [], sinceEnrolment: null })),
    metricLedgers: [],
    rejectReasons: shape.rejectReasons ?? [],
  };
}

/** Where nothing is said of days, hours or filters: no fault, and no time. */
export function soundnessOf(plan: Plan, enrolled: readonly number[]): SoundnessFacts {
  const rowFilters = plan.filters.filter(({ drop }) => drop === "rows");
  const lines = ["rejected", "duplicate", ...rowFilters.map(({ name }) => `filter:${name}`)];
  return {
    days: null,
    levels: [],
    beforeLines: lines.map((id) => ({ line: id, byVariant: enrolled })),
    enrolling: { units: enrolled, taken: rowFilters.map(() => plan.variants.map(() => 0)) },
    byMetricRows: null,
    keptUnfollowed: null,
    valuesOfFilters: [],
    sources: [],
    silences: [],
  };
}

function exitLines(plan: Plan): string[] {
  return [
    ...(plan.enrolment.inTwoVariants === "exclude" ? ["switched"] : []),
    ...plan.filters.filter((filter) => filter.drop === "units").map((filter) => `filter:${filter.name}`),
    ...(plan.followUp === null ? [] : ["follow-up"]),
  ];
}

function rowLinesOf(plan: Plan): string[] {
  return [
    "rejected",
    "duplicate",
    ...plan.filters.filter((filter) => filter.drop === "rows").map((filter) => `filter:${filter.name}`),
    "unit-not-enrolled",
  ];
}

function line(id: string, byVariant: readonly number[]) {
  return { id, units: total(byVariant), byVariant };
}

function metricCells(metric: string, leftOut: readonly number[]): MetricCells {
  const none = { variant: [], bucket: [], n: [], total: [], smallest: [], largest: [] };
  const powers = { high1: [], high2: [], high3: [], high4: [], low1: [], low2: [], low3: [], low4: [] };
  const of = { pivot: "0", scale: 1, ...none, ...powers };
  return {
    metric,
    leftOut,
    notZero: leftOut.map(() => 0),
    countedRows: 0,
    countedWithoutNumber: 0,
    cap: null,
    of,
    ratio: null,
    covariate: null,
    sizes: null,
    choices: [],
    ends: [],
  };
}

function total(counts: readonly number[]): number {
  return counts.reduce((sum, n) => sum + n, 0);
}
