import { bernoulli, buyers, type Distribution, exponential, lognormal, normal } from "./samplers.ts";

/** One row of the table: two arms whose true difference is known, and how many experiments are simulated. */
export interface Case {
  readonly control: Distribution;
  readonly variant: Distribution;
  readonly units: readonly [control: number, variant: number];
  readonly runs: number;
  /** The bootstrap-t interval is drawn in the first of them only, for it costs a hundred times the others. */
  readonly bootstrapped: number;
}

const RUNS = 10_000;
const GATE_RUNS = 20_000;
const BOOTSTRAPPED = 4000;

const ALIKE = [normal, exponential, lognormal(1), lognormal(1.5), lognormal(2), buyers(0.1, 1), bernoulli(0.01)];
const SIZES = [
  [5000, 5000],
  [6667, 3333],
  [9000, 1000],
] as const;
const SMALL = [
  [500, 500],
  [900, 100],
] as const;

const row = (control: Distribution, variant: Distribution, units: Case["units"], runs = RUNS): Case => ({
  control,
  variant,
  units,
  runs,
  bootstrapped: BOOTSTRAPPED,
});

/** 1,000 units against 9,000 of a lognormal with sigma 1.5: what the corrected interval must get right. */
export const GATE: Case = row(lognormal(1.5), lognormal(1.5), [9000, 1000], GATE_RUNS);

export const CASES: readonly Case[] = [
  ...ALIKE.flatMap((data) =>
    SIZES.map((units) => (data.name === GATE.control.name && units[1] === 1000 ? GATE : row(data, data, units))),
  ),
  ...[exponential, lognormal(1)].flatMap((data) => SMALL.map((units) => row(data, data, units))),
  // Equal means, other shapes: the few who buy pay more. Either arm may be the small one.
  ...[1, 1.5].flatMap((sigma) => [
    row(buyers(0.1, sigma), buyers(0.02, sigma), [2000, 2000]),
    row(buyers(0.1, sigma), buyers(0.02, sigma), [9000, 1000]),
    row(buyers(0.02, sigma), buyers(0.1, sigma), [9000, 1000]),
  ]),
];
