import { type ContrastFigures, checks } from "../../src/checks/index.ts";
import type { Effect } from "../../src/decision/index.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { generator } from "../../src/stats/generator.ts";
import { DRAWS_OF_SECONDARY, type Normality, type Resampled, resampled, seedOfCells } from "../../src/stats/index.ts";
import type { Contrast } from "../../src/stats/types.ts";
import { meanCells } from "../stats/buckets.ts";
import { adopt } from "./cases.ts";

/** Draws of units with a long tail, the same for every run: few of the variant's, so that it shows. */
function drawn(control: number, variant: number, { difference }: Contrast): Resampled {
  const next = generator([9, 8, 7, 6]);
  const values = (n: number) => Array.from({ length: n }, () => -Math.log((next() + 1) / 2 ** 32));
  const cells = meanCells(values(control), values(variant));
  const { estimate, standardError } = difference;
  if (estimate === null || standardError === null) throw new Error("nothing to draw for");
  return resampled({
    cells,
    difference: { estimate, standardError },
    critical: 1.96,
    draws: DRAWS_OF_SECONDARY,
    seed: seedOfCells([[control, variant]]),
    shares: null,
    isPictured: true,
  });
}

function tails(lower: number, upper: number, level: Normality["tails"]["level"]): Normality["tails"] {
  const pair = { lowerTail: lower, upperTail: upper };
  const expansion = { skew: 0.1, kurtosis: 0, freedom: 0, lean: 0, shift: 0 };
  return {
    nominal: 0.025,
    skew: 0.1,
    pooled: pair,
    own: pair,
    reported: pair,
    level,
    shapesDiffer: level === "caution",
    expansions: { pooled: expansion, own: expansion },
  };
}

/** The same contrast with its interval moved by a part of its standard error. */
function moved(contrast: Contrast, by: number, method: "normal" | "skew-corrected"): Contrast {
  const { estimate, standardError, low, high } = contrast.difference;
  const shift = by * (standardError ?? 0);
  const relative = "absent" in contrast.relative ? contrast.relative : { ...contrast.relative };
  const over = shift / (contrast.control.mean ?? 1);
  return {
    ...contrast,
    difference: { ...contrast.difference, estimate, low: (low ?? 0) + shift, high: (high ?? 0) + shift, method },
    relative:
      "absent" in relative
        ? relative
        : { ...relative, low: (relative.low ?? 0) + over, high: (relative.high ?? 0) + over },
    beside: [{ method: "normal", low: low ?? 0, high: high ?? 0 }],
  };
}

const [booked, contacts, fare] = adopt.effects as [Effect, Effect, Effect];
const base = { unitsForTails: 36, unitsByRule: { kohavi: 277, cochran: 20 }, critical: 1.959963984540054 };
const corrected = ({ difference }: Contrast) => ({
  low: difference.low ?? 0,
  high: difference.high ?? 0,
  p: 0.01,
  skew: 0.1,
});

const effects: readonly Effect[] = [
  {
    ...booked,
    normality: {
      ...base,
      tails: tails(0.0245, 0.0256, "near"),
      corrected: corrected(booked.contrast),
      largest: null,
      other: moved(booked.contrast, 0.02, "skew-corrected"),
    },
    resampled: drawn(3000, 3000, booked.contrast),
  },
  {
    ...contacts,
    normality: {
      ...base,
      tails: tails(0.071, 0.004, "strong"),
      corrected: corrected(contacts.contrast),
      unitsForTails: null,
      largest: {
        control: { ofSquares: 0.012, ofCubes: 0.4, level: "near" },
        variant: { ofSquares: 0.31, ofCubes: 0.9, level: "strong" },
      },
      other: moved(contacts.contrast, 0.8, "skew-corrected"),
    },
    resampled: drawn(2000, 250, contacts.contrast),
  },
  {
    ...fare,
    contrast: moved(fare.contrast, 0.3, "skew-corrected"),
    normality: {
      ...base,
      tails: tails(0.033, 0.018, "caution"),
      corrected: corrected(fare.contrast),
      largest: {
        control: { ofSquares: 0.012, ofCubes: 0.4, level: "near" },
        variant: { ofSquares: 0.02, ofCubes: 0.3, level: "near" },
      },
      other: fare.contrast,
    },
    resampled: { bootstrap: { notDrawn: "few-units" }, randomisation: { notDrawn: "few-units" } },
  },
];

const ofThese = ["normality", "one-unit"];

function judged(of: readonly Effect[]): ReportInputs {
  const figures = of.map(
    ({ metric, variant, control, contrast, normality }): ContrastFigures => ({
      metric,
      variant,
      control,
      method: contrast.difference.method,
      normality,
    }),
  );
  const found = checks(adopt.plan, adopt.reduction, figures).filter(({ id }) => ofThese.includes(id));
  return { ...adopt, effects: of, checks: [...adopt.checks, ...found] };
}

/** PAGES, page one: adopt, with tails that are far off for what must not get worse. */
export const farFromNormal: ReportInputs = judged(effects);

/** The same where the corrected interval counts. */
export const farAndCorrected: ReportInputs = judged(
  effects.map((effect) =>
    effect.normality?.tails.level === "strong" && effect.normality.other !== null
      ? { ...effect, contrast: effect.normality.other, normality: { ...effect.normality, other: effect.contrast } }
      : effect,
  ),
);
