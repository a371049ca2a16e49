import { createHash } from "node:crypto";
import { readdir, readFile } from "node:fs/promises";
import path from "node:path";

/** Where earlier reports of an experiment are kept, each in a folder of its own. */
export const HISTORY = "history";

/** The words before the fingerprint of the report that a rerun replaces, in section 7: by them it is found again. */
export const REPLACES = "Replaces the report with the fingerprint";

/** What section 7 says, after "Made from", of a report that was made without the log. */
export const FROM_CELLS = "cells that an earlier report had kept; the log was not read";

/** The fingerprint of a report: SHA-256 of its report.json, byte for byte. */
export function fingerprintOf(json: string): string {
  return createHash("sha256").update(json).digest("hex");
}

/** "1-3f9a20c1": the run and the beginning of its fingerprint. */
export function keptName(run: number, sha256: string): string {
  return `${run}-${sha256.slice(0, 8)}`;
}

/** "3f9a 20c1": as much of a fingerprint as a reader compares by eye. */
export function shortFingerprint(sha256: string): string {
  return `${sha256.slice(0, 4)} ${sha256.slice(4, 8)}`;
}

/** The report.json with this fingerprint that is kept in the history/ of one of these folders, or lies in one itself. */
export async function keptReport(folders: readonly string[], sha256: string): Promise<string | null> {
  for (const folder of folders) {
    const history = path.join(folder, HISTORY);
    const names = await readdir(history).catch(() => []);
    for (const place of [...names.sort().map((name) => path.join(history, name)), folder]) {
      const json = await readFile(path.join(place, "report.json"), "utf8").catch(() => null);
      if (json !== null && fingerprintOf(json) === sha256) return json;
    }
  }
  return null;
}
