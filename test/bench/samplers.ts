import { generator, type Seed } from "../../src/stats/generator.ts";

/** Units of one arm, n of them. */
export type Sampler = (n: number) => Float64Array;

/** A distribution with its name and its mean, for the truth of a simulated difference. */
export interface Distribution {
  readonly name: string;
  readonly mean: number;
  readonly sampler: (seed: Seed) => Sampler;
}

/** Uniform in (0, 1), never an end. */
const uniform = (next: () => number) => (next() + 0.5) / 2 ** 32;

/** Standard normal, two at a time: Marsaglia and Bray 1964, SIAM Review 6, 260-264. */
function normals(next: () => number): () => number {
  let spare: number | null = null;
  return () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    for (;;) {
      const [u, v] = [2 * uniform(next) - 1, 2 * uniform(next) - 1];
      const s = u * u + v * v;
      if (s >= 1 || s === 0) continue;
      const factor = Math.sqrt((-2 * Math.log(s)) / s);
      spare = v * factor;
      return u * factor;
    }
  };
}

function distribution(name: string, mean: number, unit: (next: () => number) => () => number): Distribution {
  return {
    name,
    mean,
    sampler: (seed) => {
      const draw = unit(generator(seed));
      return (n) => Float64Array.from({ length: n }, draw);
    },
  };
}

export const normal = distribution("normal", 0, normals);

export const exponential = distribution("exponential", 1, (next) => () => -Math.log(uniform(next)));

/** exp(sigma Z) over its mean, exp(sigma^2 / 2). */
export const lognormal = (sigma: number) =>
  distribution(`lognormal, sigma ${sigma}`, 1, (next) => {
    const z = normals(next);
    return () => Math.exp(sigma * z() - sigma ** 2 / 2);
  });

/** `share` of the units buy for a lognormal amount, the others for 0; the mean is 1 whatever the share. */
export const buyers = (share: number, sigma: number) =>
  distribution(`${100 * share}% buyers, lognormal, sigma ${sigma}`, 1, (next) => {
    const z = normals(next);
    return () => (uniform(next) < share ? Math.exp(sigma * z() - sigma ** 2 / 2) / share : 0);
  });

export const bernoulli = (p: number) =>
  distribution(`0 or 1, ${100 * p}%`, p, (next) => () => (uniform(next) < p ? 1 : 0));
