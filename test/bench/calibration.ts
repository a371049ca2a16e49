import { Worker } from "node:worker_threads";
import { accrualTable } from "./accrual.ts";
import { CASES, type Case, GATE } from "./calibration-cases.ts";
import { emptyTally, type Misses, type Tally } from "./calibration-run.ts";
import { type Done, RANDOMISED, type Task } from "./calibration-worker.ts";

/**
 * How often intervals miss on each side, beside what is predicted for the plain one; and whether the randomisation test's p
 * is uniform where nothing differs. Prints a table as markdown; ends with status 1 where the corrected interval fails:
 * outside 1.9% to 3.1% in the gate's row, or further from 2.5% than the plain one by more than two standard errors anywhere;
 * or where the band that holds at all times or the test of a trend does (accrual.ts).
 *
 *   npm run bench:calibration            the whole table, some minutes on two cores
 *   npm run bench:calibration -- 10      a tenth of the experiments
 */
const DIVISOR = Number(process.argv[2] ?? 1);
const WORKERS = 2;
const CHUNK = 500;
const RANDOMISED_RUNS = 1000;
const NOMINAL = 0.025;
const GATE_RANGE = [0.019, 0.031] as const;
/** Kolmogorov's statistic that a uniform p is above once in a hundred. */
const UNIFORM_UP_TO = 1.63;

const tallies = CASES.map(emptyTally);
const ps = RANDOMISED.map((): number[] => []);
await work(tasks());
print();

function tasks(): Task[] {
  const intervals = CASES.flatMap(({ runs, bootstrapped }, at) => {
    const chunks = Math.ceil(runs / DIVISOR / CHUNK);
    const each = Math.round(bootstrapped / DIVISOR / chunks);
    return Array.from(
      { length: chunks },
      (_, chunk): Task => ({ kind: "intervals", at, chunk, runs: CHUNK, bootstrapped: each }),
    );
  });
  const runs = RANDOMISED_RUNS / DIVISOR / 10;
  const randomised = RANDOMISED.flatMap((_, at) =>
    Array.from({ length: 10 }, (__, chunk): Task => ({ kind: "randomisation", at, chunk, runs })),
  );
  return [...intervals, ...randomised];
}

async function work(queue: Task[]): Promise<void> {
  const all = queue.length;
  await Promise.all(
    Array.from({ length: WORKERS }, () => {
      const worker = new Worker(new URL("./calibration-worker.ts", import.meta.url));
      return new Promise<void>((resolve, reject) => {
        const next = () => {
          const task = queue.shift();
          process.stderr.write(`\r${all - queue.length} of ${all}`);
          if (task === undefined) worker.terminate().then(() => resolve(), reject);
          else worker.postMessage(task);
        };
        worker.on("error", reject);
        worker.on("message", (done: Done) => {
          take(done);
          next();
        });
        next();
      });
    }),
  );
  process.stderr.write("\n");
}

function take(done: Done): void {
  if (done.kind === "randomisation") {
    ps[done.at]?.push(...done.ps);
    return;
  }
  const into = tallies[done.at];
  if (into === undefined) throw new Error(`no tally ${done.at} of ${tallies.length}`);
  into.runs += done.tally.runs;
  into.bootstrapped += done.tally.bootstrapped;
  for (const key of ["plain", "welch", "corrected", "bootstrap", "predicted"] as const) {
    into[key].below += done.tally[key].below;
    into[key].above += done.tally[key].above;
  }
}

function print(): void {
  const rows = CASES.map((of, at) => row(of, tallies[at] ?? emptyTally()));
  const say = (line: string) => process.stdout.write(`${line}\n`);
  say("| control; variant | units | predicted | plain | Welch | skew-corrected | bootstrap-t |");
  say("| --- | --- | --- | --- | --- | --- | --- |");
  for (const { cells } of rows) say(`| ${cells.join(" | ")} |`);
  say("");
  for (const [at, values] of ps.entries()) say(uniform(at, values));
  const accrual = accrualTable(DIVISOR);
  say("");
  for (const line of accrual.lines) say(line);
  const faults = [...rows.flatMap(({ fault }) => (fault === null ? [] : [fault])), ...accrual.faults];
  for (const fault of faults) say(`FAILS: ${fault}`);
  if (faults.length > 0) process.exitCode = 1;
}

function row(of: Case, tally: Tally): { readonly cells: string[]; readonly fault: string | null } {
  const { runs, bootstrapped, predicted, plain, welch, corrected, bootstrap } = tally;
  const names = [...new Set([of.control.name, of.variant.name])];
  const name = names.join("; ");
  const [c, t] = of.units.map((n) => n.toLocaleString("en"));
  const text = ({ below, above }: Misses, n: number) => `${percent(below / n)} / ${percent(above / n)}`;
  const cells = [name, `${c}, ${t}`, ...[predicted, plain, welch, corrected].map((misses) => text(misses, runs))];
  return {
    cells: [...cells, bootstrapped === 0 ? "not shown" : text(bootstrap, bootstrapped)],
    fault: fault(of, name, tally),
  };
}

function fault(of: Case, name: string, { runs, plain, corrected }: Tally): string | null {
  const sides = [
    [corrected.below / runs, plain.below / runs],
    [corrected.above / runs, plain.above / runs],
  ] as const;
  const error = (share: number) => 2 * Math.sqrt((share * (1 - share)) / runs);
  const further = sides.some(
    ([own, other]) => Math.abs(own - NOMINAL) > Math.abs(other - NOMINAL) + error(Math.max(own, other)),
  );
  if (further) return `${name}, ${of.units}: further from ${percent(NOMINAL)} than the plain interval`;
  const outside = of === GATE && sides.some(([own]) => own < GATE_RANGE[0] || own > GATE_RANGE[1]);
  return outside ? `${name}, ${of.units}: outside ${GATE_RANGE.map(percent).join(" to ")}` : null;
}

function uniform(at: number, values: readonly number[]): string {
  const sorted = [...values].sort((a, b) => a - b);
  const n = sorted.length;
  const furthest = Math.max(...sorted.map((p, i) => Math.max(Math.abs((i + 1) / n - p), Math.abs(p - i / n))));
  const statistic = furthest * Math.sqrt(n);
  if (statistic > UNIFORM_UP_TO) process.exitCode = 1;
  const of = RANDOMISED[at];
  return `Randomisation, ${of?.data.name}, ${of?.units.join(" and ")} units: Kolmogorov's statistic of ${n} p-values ${statistic.toFixed(2)}, under ${UNIFORM_UP_TO} where p is uniform`;
}

function percent(share: number): string {
  return `${(100 * share).toFixed(2)}%`;
}
