import type { CellTable, MetricCells, Reduction, SizeTable } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { soundnessOf } from "../checks/make.ts";

/** The page reads no cell: contrasts are computed before it. */
const noCells: CellTable = {
  pivot: "0",
  scale: 1,
  variant: [],
  bucket: [],
  n: [],
  high1: [],
  high2: [],
  high3: [],
  high4: [],
  low1: [],
  low2: [],
  low3: [],
  low4: [],
  total: [],
  smallest: [],
  largest: [],
};

const zeros = (plan: Plan) => plan.variants.map(() => 0);
const sum = (counts: readonly number[]) => counts.reduce((a, b) => a + b, 0);

/** How many units of each variant were counted, left by a filter, or were not followed to the end. */
export interface HandFlow {
  readonly analysed: readonly number[];
  readonly byFilter: readonly (readonly number[])[];
  readonly followUp: readonly number[];
  readonly notEnrolled: number;
  readonly outside: readonly number[];
  readonly unknown: number;
}

/** A reduction whose ledgers add up: a bit over ten rows a unit, as a log of page views has. */
export function reductionOf(plan: Plan, flow: HandFlow): Reduction {
  const filters = plan.filters.filter((filter) => filter.drop === "units");
  const unitLines = [
    { id: "not-enrolled", units: flow.notEnrolled, byVariant: null },
    { id: "outside-enrolment", units: sum(flow.outside), byVariant: flow.outside },
    { id: "unknown-variant", units: flow.unknown, byVariant: null },
    ...(plan.enrolment.inTwoVariants === "exclude" ? [{ id: "switched", units: 0, byVariant: zeros(plan) }] : []),
    ...filters.map(({ name }, i) => {
      const counts = flow.byFilter[i] ?? zeros(plan);
      return { id: `filter:${name}`, units: sum(counts), byVariant: counts };
    }),
    ...(plan.followUp === null ? [] : [{ id: "follow-up", units: sum(flow.followUp), byVariant: flow.followUp }]),
    { id: "analysed", units: sum(flow.analysed), byVariant: flow.analysed },
  ];
  const rowLines = [
    { id: "rejected", rows: 41 },
    { id: "duplicate", rows: 212 },
    ...plan.filters.filter((f) => f.drop === "rows").map(({ name }) => ({ id: `filter:${name}`, rows: 1_310 })),
    { id: "unit-not-enrolled", rows: flow.notEnrolled * 2 },
    { id: "unit-outside-enrolment", rows: sum(flow.outside) * 6 },
    { id: "unit-unknown-variant", rows: flow.unknown * 5 },
    ...(plan.enrolment.inTwoVariants === "exclude" ? [{ id: "unit-switched", rows: 0 }] : []),
    ...filters.map(({ name }, i) => ({ id: `unit-filter:${name}`, rows: sum(flow.byFilter[i] ?? []) * 14 })),
    ...(plan.followUp === null ? [] : [{ id: "unit-follow-up", rows: sum(flow.followUp) * 4 }]),
    { id: "before-enrolment", rows: 18_204 },
    { id: "after-follow-up", rows: plan.followUp === null ? 0 : 22_951 },
    { id: "in-follow-up", rows: sum(flow.analysed) * 9 },
  ];
  const enrolled = plan.variants.map((_, v) =>
    sum([flow.analysed[v] ?? 0, flow.followUp[v] ?? 0, ...flow.byFilter.map((counts) => counts[v] ?? 0)]),
  );
  const firstFile = Math.floor(sum(rowLines.map((line) => line.rows)) / 2);
  return {
    engine: { name: "duckdb", version: "1.5.6" },
    inputs: [
      { name: "data/part-1.csv.gz", bytes: 18_402_133, sha256: "9f".repeat(32), rows: firstFile },
      {
        name: "data/part-2.csv.gz",
        bytes: 18_377_020,
        sha256: "3c".repeat(32),
        rows: sum(rowLines.map((l) => l.rows)) - firstFile,
      },
    ],
    lists: [],
    rowsRead: sum(rowLines.map((line) => line.rows)),
    rowLines,
    unitsSeen: sum(unitLines.map((line) => line.units)),
    unitLines,
    facts: {
      enrolled,
      withRejected: enrolled.map(() => 11),
      withDuplicate: enrolled.map(() => 96),
      switched: enrolled.map(() => 74),
      duplicateIds: 212,
      copiesThatDiffer: 3,
      copiesOfOtherUnits: 0,
      hasEventId: true,
      events: [
        { value: "search_opened", rows: 601_440 },
        { value: "booking", rows: 12_650 },
      ],
      variants: plan.variants.map(({ name }) => ({ value: name, rows: 300_720 })),
      missingEvents: [],
      missingVariants: [],
      firstEnrolledUs: 1_772_407_300_000_000n, // 2 March 2026, 00:21 in Oslo
      inIncidents: plan.incidents.map(() => plan.variants.map(() => 700)),
      lastEnrolledUs: 1_773_615_500_000_000n, // 15 March 2026, 23:58 in Oslo
      logEndUs: 1_774_220_000_000_000n,
      analysedByDay: [],
      subgroups: [],
      soundness: soundnessOf(plan, enrolled),
      firstKeptUs: 1_772_407_300_000_000n,
      lastKeptUs: 1_773_615_500_000_000n,
      subgroupsAfterwards: [],
    },
    metrics: plan.metrics.map((metric) => cellsOf(metric.name, plan)),
    groups: plan.metrics.map(({ name }) => ({ metric: name, byDay: null, byLevel: [], sinceEnrolment: null })),
    metricLedgers: plan.metrics.map(({ name, of }) => ({
      metric: name,
      lines: rowLines.map(({ id, rows }) => {
        const own = Math.floor(rows / 40);
        return { id, rows: own, sum: "column" in of.aggregate ? BigInt(own) * 812_350_000_000n : null };
      }),
    })),
    rejectReasons: [
      { reason: "at is not a time", rows: 30 },
      { reason: "fare is not a number", rows: 11 },
    ],
  };
}

function cellsOf(name: string, plan: Plan): MetricCells {
  const metric = plan.metrics.find((m) => m.name === name);
  return {
    metric: name,
    leftOut: zeros(plan),
    notZero: zeros(plan),
    countedRows: 12_650,
    countedWithoutNumber: metric?.of.aggregate.kind === "sum" ? 2 : 0,
    cap: metric?.cap ? { value: "1450.5", units: plan.variants.map(() => 51) } : null,
    of: noCells,
    ratio: null,
    covariate: null,
    sizes: metric === undefined || metric.summary === "proportion" ? null : sizesOf(plan),
    choices: [],
    ends: [],
  };
}

/** Most at 0, the others about 200, one arm with a long tail and one value below 0. */
function sizesOf({ variants }: Plan): SizeTable {
  const rows = variants.flatMap((_, v) => [
    ...(v === 0 ? [] : [{ variant: v, sign: -1, quarter: 14, units: 3 }]),
    { variant: v, sign: 0, quarter: null, units: 43_800 - 300 * v },
    ...[26, 27, 28, 29, 30, 31, 32].map((quarter, i) => ({ variant: v, sign: 1, quarter, units: 800 + 40 * i + v })),
    ...(v === 1 ? [{ variant: v, sign: 1, quarter: 51, units: 1 }] : []),
  ]);
  return {
    variant: rows.map(({ variant }) => variant),
    sign: rows.map(({ sign }) => sign),
    quarter: rows.map(({ quarter }) => quarter),
    units: rows.map(({ units }) => units),
  };
}
