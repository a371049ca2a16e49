import type { Value } from "./choiceSums.ts";

/** A contrast in plain floating point, unit by unit: the textbook formulas, with nothing of the product's. */
export interface Plain {
  readonly estimate: number;
  readonly standardError: number;
  /** Of Welch's t. */
  readonly df: number;
  readonly n: number;
}

interface Level {
  readonly n: number;
  readonly mean: number;
  /** Of the mean. */
  readonly variance: number;
}

export type Kind = "mean" | "ratio" | "adjusted";

export function plainContrast(kind: Kind, values: readonly Value[]): Plain | null {
  const [control, variant] = levels(kind, values);
  if (control === undefined || variant === undefined || Math.min(control.n, variant.n) < 2) return null;
  const v = control.variance + variant.variance;
  return {
    estimate: variant.mean - control.mean,
    standardError: Math.sqrt(v),
    df: v ** 2 / (variant.variance ** 2 / (variant.n - 1) + control.variance ** 2 / (control.n - 1)),
    n: Math.min(control.n, variant.n),
  };
}

function levels(kind: Kind, values: readonly Value[]): Level[] {
  const arms = [0, 1].map((variant) => values.filter((value) => value.variant === variant));
  if (kind === "mean") return arms.map((arm) => levelOf(arm.map(({ y }) => float(y))));
  if (kind === "ratio") return arms.map(ratioOf);
  // theta of smallest variance; a missing x stands at the mean of x over both arms
  const known = values.flatMap(({ x }) => (x === null ? [] : [float(x)]));
  const centre = sum(known) / known.length;
  const pairs = arms.map((arm) => arm.map(({ y, x }) => [float(y), x === null ? centre : float(x)] as const));
  const part = (of: (pair: readonly [number, number], means: readonly [number, number]) => number) =>
    sum(
      pairs.map((arm) => {
        const means = [sum(arm.map(([y]) => y)) / arm.length, sum(arm.map(([, x]) => x)) / arm.length] as const;
        return sum(arm.map((pair) => of(pair, means))) / (arm.length - 1) / arm.length;
      }),
    );
  const theta =
    part(([y, x], [meanY, meanX]) => (y - meanY) * (x - meanX)) / part(([, x], [, meanX]) => (x - meanX) ** 2);
  return pairs.map((arm) => levelOf(arm.map(([y, x]) => y - theta * (x - centre))));
}

function ratioOf(arm: readonly Value[]): Level {
  const [a, b] = [sum(arm.map(({ y }) => float(y))), sum(arm.map(({ x }) => float(x ?? 0n)))];
  const scores = scoresOf(arm);
  return { ...levelOf(scores), mean: a / b };
}

export function scoresOf(arm: readonly Value[]): number[] {
  const [a, b] = [sum(arm.map(({ y }) => float(y))), sum(arm.map(({ x }) => float(x ?? 0n)))];
  return arm.map(({ y, x }) => (float(y) - (a / b) * float(x ?? 0n)) / (b / arm.length));
}

function levelOf(values: readonly number[]): Level {
  const mean = sum(values) / values.length;
  const squares = sum(values.map((value) => (value - mean) ** 2));
  return { n: values.length, mean, variance: squares / (values.length - 1) / values.length };
}

/** P(|T| > t), by Simpson's rule over the density; df null: the normal distribution. */
export function twoSided(t: number, df: number | null): number {
  const density = (x: number) => (df === null ? Math.exp((-x * x) / 2) : (1 + (x * x) / df) ** (-(df + 1) / 2));
  // x = tan(angle) takes the whole line in
  const integral = (from: number, to: number) => {
    const steps = 20_000;
    const h = (to - from) / steps;
    const f = (angle: number) => {
      const x = Math.tan(angle);
      return density(x) * (1 + x * x);
    };
    let all = 0;
    for (let i = 0; i < steps; i++) {
      const at = from + i * h;
      all += ((f(at) + 4 * f(at + h / 2) + f(at + h)) * h) / 6;
    }
    return all;
  };
  const end = Math.PI / 2 - 1e-9;
  return integral(Math.atan(Math.abs(t)), end) / integral(0, end);
}

const float = (nano: bigint): number => Number(nano) / 1e9;
const sum = (values: readonly number[]): number => values.reduce((all, value) => all + value, 0);
