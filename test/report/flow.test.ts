import { describe, expect, it } from "vitest";
import { flowFigure } from "../../src/report/sections/flow.ts";
import { everyCase } from "./every.ts";

const whole = (text: string) => Number(text.replaceAll(",", ""));

describe.each(everyCase)("the flow of units of the case %s", async (_, { plan, reduction }) => {
  const { trunk, arms } = await flowFigure(plan, reduction);

  it("adds up, from those seen to those enrolled, and of each variant from enrolled to counted", () => {
    const left = trunk.filter(({ stem }) => stem === "leaves").map(({ units }) => whole(units));
    const [seen, enrolled] = trunk.filter(({ total }) => total).map(({ units }) => whole(units));
    expect(seen).toBe(reduction.unitsSeen);
    expect(left.reduce((a, b) => a + b, 0) + (enrolled ?? 0)).toBe(seen);
    expect(arms.reduce((sum, { steps }) => sum + whole(steps[0]?.units ?? "0"), 0)).toBe(enrolled);
    for (const { steps } of arms) {
      const [first, ...others] = steps.map(({ units }) => whole(units));
      expect(others.reduce((a, b) => a + b, 0)).toBe(first);
    }
  });

  it("ends each variant with those counted", () => {
    const counted = reduction.unitLines.find(({ id }) => id === "analysed")?.byVariant ?? [];
    expect(arms.map(({ steps }) => whole(steps.at(-1)?.units ?? ""))).toEqual([...counted]);
  });

  it("begins, lets leave and ends, in this order", () => {
    for (const steps of [trunk, ...arms.map((arm) => arm.steps)]) {
      expect(steps.map(({ stem }) => stem).join(" ")).toMatch(/^begins( leaves)* ends$/);
    }
  });
});
