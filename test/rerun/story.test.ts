import { mkdtemp, readdir, readFile, rm, writeFile } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { writeDemo } from "../../src/cli/demo/write.ts";
import { closeout, type ReportJson, verify } from "../../src/index.ts";
import type { StepJson } from "../../src/report/index.ts";

/** The tool's daily use, on the demo: the staff accounts were left in; then two filters and a cap are corrected. */
describe("the story of three runs", () => {
  let folder: string;
  let reports: ReportJson[];
  let kept: string[];

  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), "closeout-story-"));
    const written = await writeDemo(folder);
    if ("found" in written) throw new Error(`an empty folder holds ${written.found}`);
    const right = await readFile(written.plan, "utf8");
    const [staff, loadTest] = [right.indexOf("  - name: staff accounts"), right.indexOf("  - name: load test")];
    const plans = [
      right.slice(0, staff) + right.slice(loadTest),
      right,
      right
        .replace("cap: {quantile: 0.999}", "cap: {quantile: 0.99}")
        .replace("where: {is_staff: true}", "where: {is_staff: {not: false}}")
        .replace("where: {event: booking, fare: 0}", "where: {event: booking, fare: {at-most: 400}}"),
    ];
    reports = [];
    for (const plan of plans) {
      await writeFile(written.plan, plan);
      const outcome = await closeout(written.plan, { out: join(folder, "report") });
      if (outcome.status !== 0) throw new Error(outcome.text);
      reports.push(outcome.report);
    }
    kept = (await readdir(join(folder, "report/history"))).sort();
  }, 600_000);
  afterAll(() => rm(folder, { recursive: true, force: true }));

  it("keeps both earlier runs, and numbers them", () => {
    expect(reports.map(({ changes }) => changes?.run ?? 1)).toEqual([1, 2, 3]);
    expect(kept.map((name) => name.slice(0, 2))).toEqual(["1-", "2-"]);
  });

  it("says of the second run that one filter was added, whom it removed, and that the rule is the same", async () => {
    const changes = reports[1]?.changes;
    expect(changes?.plan).toMatchObject([{ place: "filters, staff accounts", kind: "added", decides: false }]);
    expect([changes?.log, changes?.rule, changes?.steps]).toEqual([[], [], null]);
    const page = await readFile(join(folder, "report/history", kept[1] ?? "", "report.html"), "utf8");
    expect(page).toContain("The first run said the same.");
    expect(page).toContain(
      "the filter \u201cstaff accounts\u201d was added (staff book for training). The log is the same.",
    );
    expect(page).toContain("Why it moved: Booked, of the visitors left out");
  });

  it("says of the third run which of three changes moved what", () => {
    const steps = reports[2]?.changes?.steps;
    expect(steps?.changes.map(({ change }) => change)).toEqual([
      "metrics, Fare per visitor: cap",
      "filters, free tickets: where",
      "filters, staff accounts: where",
    ]);
    const estimate = (step: StepJson | null | undefined, name: string) =>
      step?.effects.find(({ metric }) => metric === name)?.estimate;
    const [cap, tickets, staff] = steps?.changes ?? [];
    // the cap belongs to the fare alone; cheap bookings that are no bookings any more move who booked as well
    expect(estimate(cap?.alone, "Booked")).toBe(estimate(steps?.start, "Booked"));
    expect(estimate(cap?.alone, "Fare per visitor")).not.toBe(estimate(steps?.start, "Fare per visitor"));
    expect(estimate(tickets?.alone, "Booked")).not.toBe(estimate(steps?.start, "Booked"));
    // with all three, the report itself
    const booked = reports[2]?.effects.find(({ metric }) => metric === "Booked");
    expect(estimate(staff?.added, "Booked")).toBe(booked?.difference.estimate);
  });

  it("holds, all three of them, when verified from where they lie", async () => {
    const places = ["report", ...kept.map((name) => `report/history/${name}`)];
    for (const place of places) expect(await verify(join(folder, place)), place).toMatchObject({ status: 0 });
  }, 600_000);

  it("does not hold with one digit edited, and that digit is named", async () => {
    const file = join(folder, "report/history", kept[0] ?? "", "report.html");
    const html = await readFile(file, "utf8");
    const found = /Booked: (\d+\.\d) of 100 visitors/.exec(html);
    const [, share = ""] = found ?? [];
    const digit = String((Number(share.at(-1)) + 1) % 10);
    await writeFile(file, html.replace(`Booked: ${share} of 100`, `Booked: ${share.slice(0, -1)}${digit} of 100`));
    const { status, text } = await verify(file);
    expect(status).toBe(4);
    expect(text).toContain("1 difference");
    expect(text).toContain("Section 1, Decision: a number differs.");
    expect(text).toContain(`Booked: ${share.slice(0, -1)}${digit} of 100`);
    expect(text).toContain(`Booked: ${share} of 100`);
  }, 600_000);
});
