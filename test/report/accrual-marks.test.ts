import { describe, expect, it } from "vitest";
import type { Incident } from "../../src/plan/types.ts";
import { renderReport } from "../../src/report/index.ts";
import { page } from "../../src/report/page.ts";
import type { ReportInputs } from "../../src/report/types.ts";
import { grouped } from "./groups.ts";
import { hostileMeanwhile } from "./hostile.ts";
import { tagsOf, textOf } from "./markup.ts";
import { meanwhile, outage } from "./meanwhile.ts";

const partsOf = async (inputs: ReportInputs) => (await page(inputs)).metrics.flatMap(({ accrual }) => accrual);
const fileOf = async (inputs: ReportInputs, name = "accrual-1") =>
  (await renderReport(inputs)).extras().find((file) => file.name === `figures/${name}.svg`)?.text ?? "";

/** The case "incidents" with one incident over the whole local days first to last of March 2026, Oslo, and enrolment since `since`. */
function during(first: number, last: number, since = 2): ReportInputs {
  const incident: Incident = {
    ...outage,
    fromUs: BigInt(Date.UTC(2026, 2, first - 1, 23)) * 1000n,
    beforeUs: BigInt(Date.UTC(2026, 2, last, 23)) * 1000n,
  };
  const analysedByDay = [{ day: Date.UTC(2026, 2, since) / 86_400_000, units: [8_000, 8_000] }];
  const { reduction } = meanwhile;
  return {
    ...meanwhile,
    plan: { ...meanwhile.plan, incidents: [incident] },
    reduction: { ...reduction, facts: { ...reduction.facts, analysedByDay } },
    choices: [],
  };
}

// 16,000 enrol a day, 2 to 7 March: 32,000 by the end of the 3rd, 48,000 of the 4th, 80,000 of the 6th, 96,000 of the 7th
describe("incidents in the figure of the effect as units enrolled", () => {
  it("are named under it, and told where they stand to those who do not see it", async () => {
    const [part] = await partsOf(meanwhile);
    expect(part?.drawing?.reading).toContain(
      "Level line: zero, where the groups do not differ. Dotted upright with a letter: so many visitors",
    );
    expect(part?.drawing?.reading).toMatch(
      / Incidents: a, "payment outage", 4 March 2026; b, "strike", 7 to 9 March 2026\.$/,
    );
    expect(part?.drawing?.drawing.svg).toContain(
      'Marked: a, "payment outage", 4 March 2026, from 32,000 to 48,000 visitors; b, "strike", 7 to 9 March 2026, from 80,000 to 96,000 visitors.</desc>',
    );
  });

  it("have a letter each in the drawing, with an upright as far along the axis as visitors were in", async () => {
    const svg = (await partsOf(meanwhile))[0]?.drawing?.drawing.svg ?? "";
    expect([...svg.matchAll(/<text [^>]*>([ab])<\/text>/g)].map(([, letter]) => letter)).toEqual(["a", "b"]);
    const uprights = [...svg.matchAll(/<line [^>]*>/g)]
      .map(([line]) => line)
      .filter((line) => line.includes('stroke-dasharray="1.5,3"'))
      .map((line) => Number(/translate\(([\d.]+),/.exec(line)?.[1]));
    expect(uprights).toHaveLength(2);
    // the axis begins at 0 visitors, 52 pixels from the left: the two are as 32,000 to 80,000
    const [a = 0, b = 0] = uprights;
    expect((b - 52) / (a - 52)).toBeCloseTo(80 / 32, 2);
  });

  it("mark the days that they touch in the table, also of a measure that is not drawn", async () => {
    const [part, fare] = await partsOf(meanwhile);
    expect(part?.columns.at(-1)).toBe("incident");
    expect(part?.rows.map(({ cells }) => cells.at(-1))).toEqual(["", "", "a", "", "", "b"]);
    expect(fare?.drawing).toBeNull();
    expect(fare?.rows.map(({ cells }) => cells.at(-1))).toEqual(["", "", "a"]);
    expect(fare?.sentences.at(-1)).toMatch(/^Incidents: a, "payment outage", 4 March 2026; b/);
  });

  it("leave a report without incidents without a word of it", async () => {
    const [part] = await partsOf(grouped);
    expect(part?.columns).toHaveLength(6);
    expect(part?.rows[0]?.cells).toHaveLength(6);
    expect(part?.drawing?.reading).toMatch(/Level line: zero, where the groups do not differ\.$/);
    expect(part?.drawing?.drawing.svg).not.toMatch(/Marked|stroke-dasharray="1\.5,3"/);
  });

  it("that nobody shown enrolled in stand where the next would have been", async () => {
    const svg = (await partsOf(during(12, 13)))[0]?.drawing?.drawing.svg;
    expect(svg).toContain("12 to 13 March 2026, at 96,000 visitors, since no visitor shown here was enrolled then.");
    expect((await partsOf(during(12, 13)))[0]?.columns).toHaveLength(6);
  });

  it("begin at no visitors where nobody had enrolled before, and not where the days before are not shown", async () => {
    const marked = async (inputs: ReportInputs) => (await partsOf(inputs))[0]?.drawing?.drawing.svg ?? "";
    expect(await marked(during(2, 3))).toContain("from 0 to 32,000 visitors");
    const begun = await marked(during(2, 3, 1));
    expect(begun).toContain("begun before the first day shown, up to 32,000 visitors");
    expect(begun).not.toContain('stroke-dasharray="1.5,3"');
    const before = (await partsOf(during(1, 1, 1)))[0];
    expect(before?.drawing?.reading).toMatch(
      /the groups do not differ\. Incident: a, "payment outage", 1 March 2026, before the first day shown\.$/,
    );
    expect(before?.drawing?.drawing.svg).not.toMatch(/Marked|>a<\/text>/);
  });

  it("that fall together stand below one another", async () => {
    const { plan } = meanwhile;
    const svg = (
      await partsOf({ ...meanwhile, plan: { ...plan, incidents: [outage, { ...outage, name: "fog" }] } })
    )[0];
    const places = [
      ...(svg?.drawing?.drawing.svg ?? "").matchAll(/translate\(([\d.]+),([\d.]+)\)"[^>]*>[ab]<\/text>/g),
    ];
    expect(places.map(([, x]) => x)).toHaveLength(2);
    expect(places[0]?.[1]).toBe(places[1]?.[1]);
    expect(Number(places[1]?.[2]) - Number(places[0]?.[2])).toBeGreaterThan(12);
  });

  it("are in the figure that is a file, with their names", async () => {
    const svg = await fileOf(meanwhile);
    expect(svg).toMatch(/>a<\/text>/);
    expect(textOf(svg).replace(/\s+/g, " ")).toContain("payment outage");
  });

  it("add no element by their names", async () => {
    for (const text of [await fileOf(hostileMeanwhile), (await renderReport(hostileMeanwhile)).html]) {
      expect(text).toContain("payment outage &lt;script&gt;");
      expect(tagsOf(text).filter(({ name }) => name === "script" || name === "img" || name === "use")).toEqual([]);
      expect(text.replace(/<pre.*?<\/pre>/s, "")).not.toMatch(/[\u202a-\u202e]/u);
    }
  });
});
