import { parentPort } from "node:worker_threads";
import { CASES } from "./calibration-cases.ts";
import { randomisationPs, simulate, type Tally } from "./calibration-run.ts";
import { buyers, exponential, lognormal } from "./samplers.ts";

/** Where no unit is changed, p must be uniform: arms of one size, and one of a fourth. */
export const RANDOMISED = [
  { data: exponential, units: [600, 600] },
  { data: lognormal(1), units: [4000, 4000] },
  { data: buyers(0.1, 1), units: [4000, 1000] },
] as const;

export type Task =
  | {
      readonly kind: "intervals";
      readonly at: number;
      readonly chunk: number;
      readonly runs: number;
      readonly bootstrapped: number;
    }
  | { readonly kind: "randomisation"; readonly at: number; readonly chunk: number; readonly runs: number };

export type Done =
  | { readonly kind: "intervals"; readonly at: number; readonly tally: Tally }
  | { readonly kind: "randomisation"; readonly at: number; readonly ps: readonly number[] };

parentPort?.on("message", (task: Task) => {
  parentPort?.postMessage(done(task));
});

function done(task: Task): Done {
  const { at, chunk, runs } = task;
  if (task.kind === "randomisation") {
    const of = RANDOMISED[at];
    if (of === undefined) throw new Error(`no case ${at} of ${RANDOMISED.length}`);
    return { kind: "randomisation", at, ps: randomisationPs(of.data, of.units, runs, [1000 + at, chunk]) };
  }
  const of = CASES[at];
  if (of === undefined) throw new Error(`no case ${at} of ${CASES.length}`);
  return { kind: "intervals", at, tally: simulate(of, [at, chunk], runs, task.bootstrapped) };
}
