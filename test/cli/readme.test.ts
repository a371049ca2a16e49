import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { loadPlan } from "../../src/plan/index.ts";

const root = new URL("../../", import.meta.url);
const text = (path: string) => readFileSync(new URL(path, root), "utf8");

describe("the README", () => {
  const readme = text("README.md");

  it("shows a plan that is right as it stands", () => {
    const plans = [...readme.matchAll(/```yaml\n([\s\S]*?)```/g)].map(([, plan = ""]) => plan);
    expect(plans.length).toBe(1);
    for (const plan of plans) expect(loadPlan(plan)).not.toHaveProperty("problems");
  });

  it("links only to files that are there", () => {
    for (const [, path = ""] of readme.matchAll(/\]\(([^)#]+)\)/g))
      expect(() => readFileSync(new URL(path, root))).not.toThrow();
  });

  it("opens with one paragraph and then the two commands", () => {
    expect(readme).toMatch(/^# closeout\n\n(?:.+\n)+\n```sh\nnpm ci && npm run demo.*\nnpm ci && npm test/);
  });
});

describe("the demo's plan", () => {
  it("is right as it stands", () => {
    expect(loadPlan(text("fixtures/demo/plan.yaml"))).not.toHaveProperty("problems");
  });
});
