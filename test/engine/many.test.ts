import { describe, expect, it } from "vitest";
import { fares, reduced } from "./small.ts";

// Plans and logs that are wide rather than long.

describe("a plan of seventy variants", () => {
  it("tells the units of each, and which of them switched", async () => {
    const variants = Array.from({ length: 70 }, (_, i) => `{name: v${i}${i === 0 ? ", control: true" : ""}}`);
    const plan = fares({ rest: "enrolment: {in-two-variants: exclude}" }).replace(
      /variants: .*/,
      `variants: [${variants.join(", ")}]`,
    );
    const rows = variants.map((_, i) => `unit ${i},2026-03-02,s,v${i},${i}`);
    // Three that switch: between neighbours, between the ends, and with a name that the plan lacks, which is no switch.
    const more = ["a", "b", "c"].map((unit) => `${unit},2026-03-02,s,v63,1`);
    const again = ["a,2026-03-03,s,v64,1", "b,2026-03-03,s,v0,1", "c,2026-03-03,s,v70,1"];
    const text = ["visitor,at,event,arm,fare", ...rows, ...more, ...again].join("\n");
    const found = await reduced(plan, { "log.csv": text });
    expect(found.units).toEqual({ switched: 2, analysed: 71 });
    expect(found.arms[0]).toEqual(variants.map((_, i) => (i === 63 ? "2: 65" : `1: ${i}`)));
  });
});

describe("a log of five hundred columns, metrics and filters in their dozens", () => {
  it("comes to the sums of each", async () => {
    const extra = Array.from({ length: 500 }, (_, i) => `x${i}`);
    const metrics = extra
      .slice(0, 40)
      .map(
        (column, i) =>
          `  - {name: M${i}, role: ${i === 0 ? "primary" : "secondary"}, summary: mean, of: {sum: ${column}}}`,
      );
    const filters = extra
      .slice(40, 60)
      .map((column) => `  - {name: F ${column}, drop: ${column === "x40" ? "units" : "rows"}, where: {${column}: 9}}`);
    const plan = fares({ rest: `filters:\n${filters.join("\n")}` }).replace(
      /metrics: .*/,
      `metrics:\n${metrics.join("\n")}`,
    );
    const row = (unit: string, arm: string, dropped: number) =>
      [unit, "2026-03-02", "s", arm, "", ...extra.map((_, i) => (i === dropped ? 9 : i % 7))].join(",");
    const rows = [row("a", "list", -1), row("b", "calendar", -1), row("c", "list", 40), row("a", "list", 59)];
    const found = await reduced(plan, {
      "log.csv": [`visitor,at,event,arm,fare,${extra.join(",")}`, ...rows].join("\n"),
    });
    expect(found.arms).toEqual(metrics.map((_, i) => [`1: ${i % 7}`, `1: ${i % 7}`]));
    expect(found.rows).toEqual({ "filter:F x59": 1, "unit-filter:F x40": 1, "in-follow-up": 2 });
  });
});
