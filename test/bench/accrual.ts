import { isAbsent } from "../../src/stats/absent.ts";
import { bandCritical } from "../../src/stats/band.ts";
import type { ShapedArm } from "../../src/stats/expansion.ts";
import { seedOf } from "../../src/stats/generator.ts";
import { normalCritical, normalTwoSided } from "../../src/stats/normal.ts";
import { tails } from "../../src/stats/tails.ts";
import { bernoulli, buyers, type Distribution, exponential, lognormal, normal } from "./samplers.ts";

/**
 * Tests in which nothing differs, looked at as units accrue: how often the band that holds at all times leaves out no
 * difference at some look, beside the interval of one moment that is looked at as often; and how often the trend over days
 * since enrolment is found where there is none.
 */

const ALPHA = 0.05;
const Z = normalCritical(ALPHA);
/** Units of each arm: from the report's least number on, a look every 50. */
const FROM = 200;
const STEP = 50;
const TO = 10_000;
const RUNS = 1000;
const TREND_RUNS = 10_000;
const TREND_UNITS = 500;
const DAYS = 7;
const TREND_SIZE = [0.04, 0.06] as const;

interface Accrued {
  readonly data: Distribution;
  /** Units of control and variant between two looks. */
  readonly step: readonly [number, number];
}
const ALIKE = [normal, exponential, bernoulli(0.1), lognormal(1), buyers(0.1, 1), lognormal(1.5), lognormal(2)];
const ACCRUED: readonly Accrued[] = [
  ...ALIKE.map((data) => ({ data, step: [STEP, STEP] }) as const),
  ...[exponential, lognormal(1), lognormal(1.5)].map((data) => ({ data, step: [90, 10] }) as const),
];

/** The lines of the table, and what fails. */
export function accrualTable(divisor: number): { readonly lines: string[]; readonly faults: string[] } {
  const runs = Math.ceil(RUNS / divisor);
  const bands = ACCRUED.map((of, at) => ({ of, ...accruals(of, runs, at) }));
  const trends = [normal, exponential].map((data, at) => ({ data, size: trendSize(data, TREND_RUNS / divisor, at) }));
  const lines = [
    "| units | arms | band, at some look | one moment's interval, at some look | the same, at the last look |",
    "| --- | --- | --- | --- | --- |",
    ...bands.map(
      ({ of, shown, band, moment, last }) =>
        `| ${of.data.name} | ${of.step.join(" to ")} | ${[band, moment, last].map((n) => (shown === 0 ? "not shown" : percent(n / shown))).join(" | ")} |`,
    ),
    "",
    ...trends.map(
      ({ data, size }) =>
        `Trend over ${DAYS} days since enrolment, ${data.name}, ${TREND_UNITS} units in each arm: found in ${percent(size)} of ${TREND_RUNS / divisor} tests without one`,
    ),
  ];
  const missed = (bands[0]?.band ?? runs) / (bands[0]?.shown ?? runs);
  const wrongTrends = trends.filter(({ size }) => size < TREND_SIZE[0] || size > TREND_SIZE[1]);
  return {
    lines,
    faults: [
      ...(missed > ALPHA ? [`band of ${normal.name} units: leaves out the truth in ${percent(missed)}`] : []),
      ...wrongTrends.map(({ data, size }) => `trend of ${data.name} units: found in ${percent(size)}`),
    ],
  };
}

/** Of so many accruals without a difference, how many leave 0 out. */
function accruals({ data, step: [ofControl, ofVariant] }: Accrued, runs: number, at: number) {
  const [control, variant] = [0, 1].map((arm) => data.sampler(seedOf("accrual", [[at, arm]])));
  if (control === undefined || variant === undefined) throw new Error("two arms have two samplers");
  const band = { alpha: ALPHA, planned: 2 * TO };
  const misses = { shown: 0, band: 0, moment: 0, last: 0 };
  for (let run = 0; run < runs; run++) {
    const [c, t] = [running(), running()];
    const missed = { band: false, moment: false, last: false };
    let isShown = false;
    for (let looks = 1; looks <= TO / STEP; looks++) {
      c.add(control(ofControl));
      t.add(variant(ofVariant));
      if (looks * Math.min(ofControl, ofVariant) < FROM) continue;
      const [ofC, ofT] = [c.arm(), t.arm()];
      isShown ||= isNear(ofC, ofT);
      if (!isShown) continue;
      const z = Math.abs(t.mean() - c.mean()) / Math.sqrt(ofC.variance + ofT.variance);
      missed.band ||= z > bandCritical(looks * (ofControl + ofVariant), band);
      missed.moment ||= z > Z;
      missed.last = z > Z;
    }
    if (isShown) misses.shown++;
    for (const key of ["band", "moment", "last"] as const) if (missed[key]) misses[key]++;
  }
  return misses;
}

function isNear(c: ShapedArm, t: ShapedArm): boolean {
  const found = tails(c, t, Z);
  return !isAbsent(found) && found.level !== "strong";
}

/** Power sums of the units so far; the distributions have means and spreads about 1, so plain sums keep their digits. */
function running() {
  let n = 0;
  const sums = [0, 0, 0, 0];
  const mean = () => (sums[0] ?? 0) / n;
  return {
    add(units: Float64Array): void {
      n += units.length;
      for (const x of units) for (let k = 0; k < 4; k++) sums[k] = (sums[k] ?? 0) + x ** (k + 1);
    },
    mean,
    arm(): ShapedArm {
      const [m, s2, s3, s4] = [mean(), (sums[1] ?? 0) / n, (sums[2] ?? 0) / n, (sums[3] ?? 0) / n];
      const m2 = s2 - m * m;
      const m3 = s3 - 3 * m * s2 + 2 * m ** 3;
      const m4 = s4 - 4 * m * s3 + 6 * m * m * s2 - 3 * m ** 4;
      return {
        n,
        variance: m2 / (n - 1),
        skewness: m2 > 0 ? m3 / m2 ** 1.5 : 0,
        kurtosis: m2 > 0 ? m4 / m2 ** 2 - 3 : 0,
        ratio: null,
      };
    },
  };
}

/**
 * The share of tests without a trend in which one is found: each unit has a level of its own and does less from day to day,
 * so its days are not independent, and those of both arms have the same course.
 */
function trendSize(data: Distribution, runs: number, at: number): number {
  const draw = data.sampler(seedOf("trend", [[at]]));
  const weights = Array.from({ length: DAYS }, (_, day) => day - (DAYS - 1) / 2);
  const spread = weights.reduce((sum, weight) => sum + weight * weight, 0);
  const arm = () => {
    let [sum, squares] = [0, 0];
    for (let unit = 0; unit < TREND_UNITS; unit++) {
      const [own = 0, ...days] = draw(DAYS + 1);
      const slope = days.reduce((total, x, day) => total + (weights[day] ?? 0) * (own + x) * 0.7 ** day, 0) / spread;
      sum += slope;
      squares += slope * slope;
    }
    const mean = sum / TREND_UNITS;
    return { mean, v: (squares / TREND_UNITS - mean * mean) / (TREND_UNITS - 1) };
  };
  let found = 0;
  for (let run = 0; run < runs; run++) {
    const [c, t] = [arm(), arm()];
    if (normalTwoSided((t.mean - c.mean) / Math.sqrt(c.v + t.v)) < ALPHA) found++;
  }
  return found / runs;
}

function percent(share: number): string {
  return `${(100 * share).toFixed(2)}%`;
}
