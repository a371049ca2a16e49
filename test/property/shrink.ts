import { readFileSync } from "node:fs";
import { join } from "node:path";
import { oracle } from "../oracle/oracle.ts";
import { planFromYaml } from "../oracle/plan.ts";
import { type RandomCase, rawFiles, rawLists, writeCase } from "../oracle/random/case.ts";
import { type Form, PLAIN } from "../oracle/random/write.ts";
import { departures } from "./compare.ts";
import { type RunOptions, runEngine } from "./run.ts";
import { inFolder } from "./temporary.ts";

/** Where the engine departs from the oracle on one log, written in one form. */
export function tryCase(drawn: RandomCase, form: Form, options: RunOptions = {}): Promise<string[]> {
  return inFolder(async (folder) => {
    const { path, text } = writeCase(folder, drawn, form);
    const plan = planFromYaml(text);
    const expected = oracle(plan, rawFiles(drawn), rawLists(drawn));
    try {
      return departures(plan, expected, await runEngine(path, options));
    } catch (error) {
      return [`the engine stopped: ${error instanceof Error ? error.message.replaceAll(folder, "") : String(error)}`];
    }
  });
}

const MOST_RUNS = 150;

/** The same departure on fewer rows, for the reader of a failed test: plan, log and what differs. */
export async function smallest(drawn: RandomCase, form: Form): Promise<string> {
  const kind = kindOf(await tryCase(drawn, form));
  const plain = kindOf(await tryCase(drawn, PLAIN)) === kind;
  const shape = plain ? PLAIN : form;
  let small = drawn;
  let runs = 0;
  for (let size = 16; size >= 1; size = Math.floor(size / 2)) {
    for (const [source, { rows }] of small.sources.entries()) {
      for (let at = rows.length - size; at >= 0 && runs < MOST_RUNS; at -= size, runs++) {
        const fewer = without(small, source, at, size);
        if (kindOf(await tryCase(fewer, shape)) === kind) small = fewer;
      }
    }
  }
  const left = await tryCase(small, shape);
  const files = await inFolder(async (folder) => {
    const { text } = writeCase(folder, small, PLAIN);
    const logs = small.sources.map((_, at) => readFileSync(join(folder, `log ${at}`, "part-0.csv"), "utf8"));
    return [text, ...logs, ...small.lists.map((list) => `${list.file}: ${list.ids.join(" | ")}`)].join("\n");
  });
  return `seed ${drawn.seed}, ${plain ? "whatever the form" : `only as ${JSON.stringify(form)}`}\n${left.slice(0, 20).join("\n")}\n\n${files}`;
}

/** The place of the first departure, or why the engine stopped: what shrinking must keep, lest it end at another one. */
function kindOf([first = ""]: readonly string[]): string {
  return first.startsWith("/") ? (first.split(":")[0] ?? "") : first.slice(0, 80).replace(/\d/g, "");
}

function without(drawn: RandomCase, source: number, at: number, size: number): RandomCase {
  return {
    ...drawn,
    sources: drawn.sources.map((entry, place) =>
      place === source ? { ...entry, rows: entry.rows.toSpliced(at, size) } : entry,
    ),
  };
}
