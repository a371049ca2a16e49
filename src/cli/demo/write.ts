import { copyFile, mkdir, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { demoLog } from "./log.ts";

const PLAN = new URL("../../../fixtures/demo/plan.yaml", import.meta.url);

/** Writes the demo's plan.yaml and data/ into the folder. Returns the plan's path. */
export async function writeDemo(folder: string): Promise<string> {
  await mkdir(join(folder, "data"), { recursive: true });
  for (const file of demoLog()) await writeFile(join(folder, file.name), file.bytes);
  const plan = join(folder, "plan.yaml");
  await copyFile(PLAN, plan);
  return plan;
}
