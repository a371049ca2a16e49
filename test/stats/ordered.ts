import {
  answered,
  normalCritical,
  type QuantileContrast,
  quantileContrast,
  type RankValues,
} from "../../src/stats/index.ts";

/** The quantile's contrast of values at hand, and how it asked for them. */
export function compared(control: readonly number[], variant: readonly number[], q: string, alpha: number) {
  const [c, t] = [sorted(control), sorted(variant)];
  const rounds: number[] = [];
  const contrast: QuantileContrast = answered(
    quantileContrast({ control: c.length, variant: t.length }, q, normalCritical(alpha)),
    (asked): RankValues => {
      rounds.push(asked.control.length + asked.variant.length);
      return { control: asked.control.map((rank) => at(c, rank)), variant: asked.variant.map((rank) => at(t, rank)) };
    },
  );
  return { ...contrast, rounds };
}

function sorted(values: readonly number[]): bigint[] {
  return [...values].sort((a, b) => a - b).map(nano);
}

/** A value of at most 9 places in 10^-9; exact for whole numbers, and for others up to some millions. */
export function nano(value: number): bigint {
  return Number.isInteger(value) ? BigInt(value) * 1_000_000_000n : BigInt(Math.round(value * 1e9));
}

function at(values: readonly bigint[], rank: number): bigint {
  const value = values[rank - 1];
  if (value === undefined) throw new Error(`rank ${rank} of ${values.length}`);
  return value;
}
