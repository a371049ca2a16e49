import { describe, expect, it } from "vitest";
import { randomCase, writeCase } from "../oracle/random/case.ts";
import { type Form, PLAIN } from "../oracle/random/write.ts";
import { type RunOptions, runReport } from "./run.ts";
import { inFolder, twoAtATime } from "./temporary.ts";

// DESIGN 1.3: the same rows give the same effects, flow and checks for any row order, file split, format and thread count.
const OTHERS: readonly { readonly what: string; readonly form: Partial<Form>; readonly options?: RunOptions }[] = [
  { what: "on two threads", form: {}, options: { threads: 2 } },
  { what: "shuffled", form: { shuffled: true } },
  { what: "split over three files and shuffled", form: { files: 3, shuffled: true } },
  { what: "as tsv, packed, with CR LF", form: { format: "tsv", gz: true, lineEnd: "\r\n" } },
  {
    what: "as ndjson, split and shuffled, on two threads",
    form: { format: "ndjson", files: 2, shuffled: true },
    options: { threads: 2 },
  },
];
const SEEDS = Array.from({ length: 25 }, (_, at) => 700 + at);
const MINUTES = 60_000;

describe("the same rows", () => {
  const plain = new Map<number, Promise<Report>>();
  const plainReport = (seed: number) =>
    plain.get(seed) ?? plain.set(seed, report(seed, PLAIN, { threads: 1 })).get(seed);

  it.each(OTHERS)(
    "give the same bytes of effects, flow and checks $what",
    { timeout: 5 * MINUTES },
    async ({ form, options }) => {
      const pairs = await twoAtATime(SEEDS, async (seed) => ({
        seed,
        expected: await plainReport(seed),
        found: await report(seed, { ...PLAIN, ...form }, { threads: 1, ...options }),
      }));
      for (const { seed, expected, found } of pairs) expect(found, `seed ${seed}`).toEqual(expected);
    },
  );
});

type Report = Awaited<ReturnType<typeof runReport>>;

function report(seed: number, form: Form, options: RunOptions): Promise<Report> {
  return inFolder(async (folder) => {
    // Another seed for each form, so that rows, columns and quotes fall elsewhere.
    const { path } = writeCase(folder, randomCase(seed), form, seed + JSON.stringify(form).length);
    return runReport(path, options);
  });
}
