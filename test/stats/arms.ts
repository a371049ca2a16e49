import type { Arm, PowerSums } from "../../src/cells/types.ts";

/**
 * Power sums as DESIGN 5 describes them, written from that text alone and without the engine: decimal text to 10^-9, the
 * pivot of the bulk, u, and every u^k in two whole numbers.
 */

/** A value and how many units have it. */
export type Repeated = readonly [value: number, units: number];

export function sumsOf(values: readonly number[]): PowerSums {
  return sumsTogether([values])[0] as PowerSums;
}

/** Groups that share pivot and scale, as the arms of one metric do. */
export function sumsTogether(groups: readonly (readonly number[])[]): PowerSums[] {
  return repeatedTogether(groups.map((values) => values.map((value) => [value, 1] as const)));
}

export function repeatedTogether(groups: readonly (readonly Repeated[])[]): PowerSums[] {
  const all = groups.flat().map(([value, units]) => ({ nano: nanoOf(value), units: BigInt(units) }));
  const pivot = pivotOf(all.filter(({ units }) => units > 0n));
  const reach = all.reduce((far, { nano }) => largerOf(far, sizeOf(nano - pivot)), 0n);
  const scale = scaleOf(numberOf(reach));
  return groups.map((group) => sums(group, pivot, scale));
}

export function meanArm(values: readonly number[]): Arm {
  return { kind: "mean", sums: sumsOf(values) };
}

export function shareArm(successes: number, n: number): Arm {
  const [sums] = repeatedTogether([
    [
      [1, successes],
      [0, n - successes],
    ],
  ]);
  return { kind: "proportion", sums: sums as PowerSums };
}

export function ratioArm(a: readonly number[], b: readonly number[]): Arm {
  const [numerator, denominator] = [sumsOf(a), sumsOf(b)];
  if (denominator.total === 0n) return { kind: "ratio", numerator, denominator, score: null };
  const ratio = Number(numerator.total) / Number(denominator.total);
  const meanOfB = Number(denominator.total) / b.length / 1e9;
  const d = a.map((x, i) => (x - ratio * (b[i] ?? 0)) / meanOfB);
  const scale = scaleOf(Math.max(...d.map(Math.abs)));
  const score: PowerSums = {
    n: d.length,
    pivot: "0",
    scale,
    powers: termsOf(d.map((x) => [x / scale, 1])),
    total: null,
    smallest: Math.min(...d) + ratio,
    largest: Math.max(...d) + ratio,
  };
  return { kind: "ratio", numerator, denominator, score };
}

function sums(group: readonly Repeated[], pivot: bigint, scale: number): PowerSums {
  const held = group.filter(([, units]) => units > 0);
  const values = held.map(([value]) => value);
  return {
    n: held.reduce((n, [, units]) => n + units, 0),
    pivot: textOf(pivot),
    scale,
    powers: termsOf(held.map(([value, units]) => [numberOf(nanoOf(value) - pivot) / scale, units])),
    total: held.reduce((total, [value, units]) => total + nanoOf(value) * BigInt(units), 0n),
    smallest: held.length === 0 ? null : values.reduce((a, b) => Math.min(a, b)),
    largest: held.length === 0 ? null : values.reduce((a, b) => Math.max(a, b)),
  };
}

function termsOf(us: readonly Repeated[]): PowerSums["powers"] {
  const total: [bigint, bigint, bigint, bigint] = [0n, 0n, 0n, 0n];
  for (const [u, units] of us) {
    let power = 1;
    for (const k of [0, 1, 2, 3] as const) {
      power *= u;
      const t = power * 2 ** 60;
      const high = Math.floor(t);
      const low = Math.floor((t - high) * 2 ** 60 + 0.5);
      total[k] += ((BigInt(high) << 60n) + BigInt(low)) * BigInt(units);
    }
  }
  return total;
}

function pivotOf(values: readonly { nano: bigint; units: bigint }[]): bigint {
  const classes = new Map<number, { units: bigint; total: bigint }>();
  let all = 0n;
  for (const { nano, units } of values) {
    const size = Math.abs(numberOf(nano));
    const power = size === 0 ? Number.NEGATIVE_INFINITY : Math.floor(Math.log2(size));
    const held = classes.get(power) ?? { units: 0n, total: 0n };
    classes.set(power, { units: held.units + units, total: held.total + nano * units });
    all += units;
  }
  const fromTop = [...classes].sort(([a], [b]) => b - a).map(([, held]) => held);
  let dropped = 0n;
  while (fromTop.length > 1) {
    dropped += fromTop[0]?.units ?? 0n;
    if (dropped > largerOf(1n, all / 1000n)) break;
    fromTop.shift();
  }
  const n = fromTop.reduce((sum, held) => sum + held.units, 0n);
  const total = fromTop.reduce((sum, held) => sum + held.total, 0n);
  return n === 0n ? 0n : halfAway(total, n);
}

/** Whole number of 10^-9 of a double's shortest decimal; more than 9 places round half away from zero. */
export function nanoOf(value: number): bigint {
  const [digits = "0", exponent = "0"] = String(value).replace("-", "").split("e");
  const [whole = "0", places = ""] = digits.split(".");
  const shift = Number(exponent) + 9 - places.length;
  const size = BigInt(whole + places);
  const nano = shift >= 0 ? size * 10n ** BigInt(shift) : halfAway(size, 10n ** BigInt(-shift));
  return value < 0 ? -nano : nano;
}

function textOf(nano: bigint): string {
  const size = sizeOf(nano).toString().padStart(10, "0");
  const places = size.slice(-9).replace(/0+$/, "");
  return `${nano < 0n ? "-" : ""}${size.slice(0, -9)}${places === "" ? "" : `.${places}`}`;
}

function numberOf(nano: bigint): number {
  return Number(textOf(nano));
}

function scaleOf(reach: number): number {
  if (reach === 0) return 1;
  let scale = 1;
  while (scale < reach) scale *= 2;
  while (scale / 2 >= reach) scale /= 2;
  return scale;
}

function halfAway(value: bigint, by: bigint): bigint {
  const rounded = (2n * sizeOf(value) + by) / (2n * by);
  return value < 0n ? -rounded : rounded;
}

function sizeOf(value: bigint): bigint {
  return value < 0n ? -value : value;
}

function largerOf(a: bigint, b: bigint): bigint {
  return a < b ? b : a;
}
