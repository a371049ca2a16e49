import { existsSync } from "node:fs";
import { availableParallelism } from "node:os";
import { Tinypool } from "tinypool";
import { type Resampled, resampled, type ToDraw } from "./stats/index.ts";

export interface DrawOptions {
  /** At most so many; without it one for each processor. */
  readonly threads?: number | undefined;
  readonly signal?: AbortSignal | undefined;
}

/** Fewer draws than this in all are made sooner than threads have started; one thread more for each so many. */
const MANY = 40_000;
const FOR_A_THREAD = 10_000;

// There once it is compiled. Run from its source, or bundled into another program, the draws are made here.
const WORKER = new URL("./stats/resampled.js", import.meta.url);

/**
 * Gives `use` a function that draws, in threads where there is much to draw. What is drawn is a function of its argument, so
 * it is the same in any thread.
 */
export async function withDrawers<Of>(
  toDraw: readonly (ToDraw | null)[],
  { threads = availableParallelism(), signal }: DrawOptions,
  use: (draw: (toDraw: ToDraw) => Resampled | Promise<Resampled>) => Promise<Of>,
): Promise<Of> {
  signal?.throwIfAborted();
  const draws = toDraw.reduce((sum, of) => sum + (of?.draws ?? 0), 0);
  if (draws < MANY || threads < 2 || !existsSync(WORKER)) return use(resampled);
  const most = Math.min(threads, Math.floor(draws / FOR_A_THREAD));
  // A loader that this program was started with has nothing to do there, and would be started once more in each.
  const pool = new Tinypool({ filename: WORKER.href, minThreads: most, maxThreads: most, execArgv: [] });
  // One listener for all that is drawn: a signal warns of more than ten.
  const stop = () => void pool.destroy();
  signal?.addEventListener("abort", stop);
  try {
    return await use((of) => pool.run(of, { name: resampled.name }));
  } finally {
    signal?.removeEventListener("abort", stop);
    await pool.destroy();
  }
}
