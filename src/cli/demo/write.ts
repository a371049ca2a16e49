import { mkdir, readFile, rename, rm, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { setImmediate } from "node:timers/promises";
import { demoLog } from "./log.ts";

const PLAN = new URL("../../../fixtures/demo/plan.yaml", import.meta.url);

/** The folder holds a plan that the demo must not overwrite. */
export interface DemoProblem {
  readonly found: string;
}

/** Writes the demo's plan.yaml and data/ into the folder and returns the plan's path; a plan of the user's is left alone. */
export async function writeDemo(
  folder: string,
  signal?: AbortSignal,
): Promise<{ readonly plan: string } | DemoProblem> {
  const plan = join(folder, "plan.yaml");
  const text = await readFile(PLAN);
  const there = await readIfThere(plan);
  if (there !== null && !there.equals(text)) return { found: plan };

  await mkdir(join(folder, "data"), { recursive: true });
  // Making the log takes a few seconds without a pause: let the progress line and a Ctrl-C through first.
  await setImmediate();
  signal?.throwIfAborted();
  for (const file of demoLog()) await writeWhole(join(folder, file.name), file.bytes, signal);
  await writeWhole(plan, text, signal);
  return { plan };
}

/** Under its name a file is whole or not there at all. */
async function writeWhole(path: string, bytes: Uint8Array, signal: AbortSignal | undefined): Promise<void> {
  const part = `${path}.part`;
  try {
    signal?.throwIfAborted();
    await writeFile(part, bytes);
    await rename(part, path);
  } catch (error) {
    await rm(part, { force: true });
    throw error;
  }
}

async function readIfThere(path: string): Promise<Buffer | null> {
  try {
    return await readFile(path);
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "ENOENT") return null;
    throw error;
  }
}
