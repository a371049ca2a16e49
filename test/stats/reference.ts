import { readFileSync } from "node:fs";

/** Values made outside this project; the script that made each file stands beside it in test/reference. */
function read<Shape>(name: string): Shape {
  return JSON.parse(readFileSync(new URL(`../reference/${name}`, import.meta.url), "utf8")) as Shape;
}

/** mpmath 1.3.0: z, alpha, t and chi-square with their tails, 20 digits. */
export const tails = () =>
  read<{
    normal: [z: number, upper: string][];
    critical: [alpha: number, z: string][];
    student: [t: number, df: number, twoSided: string][];
    chiSquare: [x: number, df: number, upper: string][];
  }>("tails.json");

/** Exact fractions, then mpmath 1.3.0. */
export const exactMoments = () =>
  read<
    {
      name: string;
      arms: { values: string[]; mean: string; variance: string; skewness: string; kurtosis: string }[];
    }[]
  >("moments.json");

/** mpmath 1.3.0: ends of Fieller and MOVER intervals where the textbook formulas cancel. */
export const relativeEnds = () =>
  read<{
    fieller: {
      control: number;
      variant: number;
      halfControl: number;
      halfVariant: number;
      low: string;
      high: string;
    }[];
    mover: { control: [number, number]; variant: [number, number]; z: number; low: string; high: string }[];
  }>("relative.json");

/** NIST Statistical Reference Datasets, univariate. */
export const nist = () =>
  read<{ sets: { name: string; mean: string; sd: string; values?: number[]; digits?: string }[] }>("nist.json").sets;

interface Interval {
  confidence: number;
  low: string;
  high: string;
  p: string;
  relativeLow: string | null;
  relativeHigh: string | null;
}

/** R 4.2.2, boot 1.3-28.1. */
export const fromR = () =>
  read<{
    welch: (Interval & { control: number[]; variant: number[]; t: string; df: string; standardError: string })[];
    shares: (Interval & {
      control: [number, number];
      variant: [number, number];
      wilsonControl: [string, string];
      wilsonVariant: [string, string];
    })[];
    ratio: { numerator: number[]; denominator: number[]; ratio: string; variance: string; influence: string }[];
    fisher: { table: [number, number, number, number]; p: string }[];
    independence: { table: number[][]; chiSquare: string; df: number; p: string; smallestExpected: string }[];
    goodness: { counts: number[]; shares: number[]; chiSquare: string; df: number; p: string }[];
  }>("values.json");

/** mpmath 1.3.0: Dunnett's tails and critical values, 16 digits. */
export const dunnett = () =>
  read<{
    tails: [z: number, lambdas: number[], p: string][];
    critical: [alpha: number, lambdas: number[], critical: string][];
  }>("dunnett.json");

/** R 4.2.2, mvtnorm 1.1-3; `off` is how far the last digits can be off. */
export const dunnettByMvtnorm = () =>
  read<{ z: number; lambdas: number[]; p: string; off: string }[]>("dunnett-mvtnorm.json");

/** R 4.2.2: families of p with p.adjust's; null where one is missing. */
export const adjustedPs = () =>
  read<{ name: string; p: (string | null)[]; holm: (string | null)[]; benjaminiHochberg: (string | null)[] }[]>(
    "adjusted-p.json",
  );

/** R 4.2.2: power.t.test, power.prop.test (units an arm), and exaggeration by numerical integration. */
export const power = () =>
  read<{
    means: { delta: number; sd: number; alpha: number; power: number; n: string }[];
    shares: { control: number; variant: number; alpha: number; power: number; n: string }[];
    exaggeration: {
      effect: number;
      standardError: number;
      alpha: number;
      power: string;
      wrongSign: string;
      factor: string;
    }[];
  }>("power.json");

/** R 4.2.2: quantiles of two arms on R's own data, intervals and p from their definitions. */
export const quantiles = () =>
  read<
    {
      name: string;
      q: string;
      alpha: number;
      control: number[];
      variant: number[];
      ofControl: string;
      ofVariant: string;
      low: string | null;
      high: string | null;
      p: string;
      relative: { estimate: string; low: string | null; high: string | null } | null;
    }[]
  >("quantile.json");

/** R 4.2.2, MASS 7.3-58.2: adjusted contrasts of R's own data. */
export const covariates = () =>
  read<
    {
      name: string;
      control: { y: number[]; x: (number | null)[] };
      variant: { y: number[]; x: (number | null)[] };
      theta: string;
      centre: string;
      levelControl: string;
      levelVariant: string;
      standardError: string;
      t: string;
      df: string;
      varianceReduction: string;
      regression: { slope: string; difference: string };
      interacted: string;
      balance: { difference: string; t: string; p: string; standardised: string };
    }[]
  >("covariate.json");

interface AdjustedShape {
  readonly mean: string;
  readonly sd: string;
  readonly skewness: string;
  readonly kurtosis: string;
}

/** R 4.2.2: adjusted contrasts on R's own data by cov, var and t.test, slopes of lm where those are the same. */
export const adjustedContrasts = () =>
  read<
    {
      name: string;
      y: number[];
      x: (number | null)[];
      variant: number[];
      method: "normal" | "welch";
      theta: string;
      meanOfX: string;
      varianceReduction: string;
      estimate: string;
      standardError: string;
      low: string;
      high: string;
      p: string;
      relative: string;
      relativeLow: string;
      relativeHigh: string;
      slope: string | null;
      effect: string | null;
      control: AdjustedShape;
      treated: AdjustedShape;
    }[]
  >("adjusted-contrast.json");

/** rpact 3.3.4 and mvtnorm 1.1-3: boundaries of planned looks, and the constants of O'Brien and Fleming and of Pocock. */
export const lookBoundariesElsewhere = () =>
  read<
    {
      by: "rpact" | "mvtnorm";
      type: "asOF" | "asP" | "OF" | "P";
      shares: number[];
      alpha: number;
      last?: boolean;
      boundaries: string[];
    }[]
  >("looks.json");
