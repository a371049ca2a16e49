import { gunzipSync } from "node:zlib";
import { beforeAll, describe, expect, it } from "vitest";
import { CAST } from "../../src/cli/demo/cast.ts";
import { type DemoFile, demoLog, FLAWS } from "../../src/cli/demo/log.ts";
import { PLANTED } from "../../src/cli/demo/planted.ts";
import { random, splitMix64, xoshiro128PlusPlus } from "../../src/cli/demo/random.ts";

describe("the demo's generator", () => {
  // The first outputs of the reference program splitmix64.c for seed 1234567, as Rosetta Code prints them
  // ("Pseudo-random numbers/Splitmix64").
  it("gives SplitMix64's published words", () => {
    expect(splitMix64(1234567n, 3)).toEqual([6457827717110365317n, 3203168211198807973n, 9817491932198370423n]);
  });

  // The reference program xoshiro128plusplus.c from the state 1, 2, 3, 4: the vector in the tests of Rust's rand_xoshiro
  // (xoshiro128plusplus.rs) and of Nim's randnimgulins.
  it("gives xoshiro128++'s published words", () => {
    const next = xoshiro128PlusPlus([1, 2, 3, 4]);
    expect(Array.from({ length: 5 }, next)).toEqual([641, 1573767, 3222811527, 3517856514, 836907274]);
  });

  it("draws standard normal and Poisson numbers with the right mean and variance", () => {
    const draws = random(1n);
    const n = 200_000;
    const moments = (make: () => number) => {
      const values = Array.from({ length: n }, make);
      const mean = values.reduce((sum, x) => sum + x, 0) / n;
      return { mean, variance: values.reduce((sum, x) => sum + (x - mean) ** 2, 0) / n };
    };
    const normal = moments(() => draws.normal());
    const poisson = moments(() => draws.poisson(1.1));
    // Five standard errors: sqrt(1 / n) for the mean, sqrt(2 / n) for the variance of a normal.
    expect(Math.abs(normal.mean)).toBeLessThan(5 * Math.sqrt(1 / n));
    expect(Math.abs(normal.variance - 1)).toBeLessThan(5 * Math.sqrt(2 / n));
    expect(Math.abs(poisson.mean - 1.1)).toBeLessThan(5 * Math.sqrt(1.1 / n));
    expect(Math.abs(poisson.variance - 1.1)).toBeLessThan(5 * Math.sqrt((1.1 + 2 * 1.1 ** 2) / n));
  });
});

interface WebRow {
  readonly id: string;
  readonly at: number;
  readonly visitor: string;
  readonly event: string;
  readonly arm: string;
  readonly fare: string;
  readonly seconds: string;
  readonly staff: string;
}

const DAY = 86_400_000;

describe("the demo's log", () => {
  let files: DemoFile[];
  let lines: string[];
  let rows: WebRow[];
  let desk: { at: number; visitor: string }[];

  beforeAll(() => {
    files = demoLog();
    const text = (name: RegExp) => files.filter((file) => name.test(file.name)).map((file) => Buffer.from(file.bytes));
    lines = text(/web/).flatMap((bytes) => gunzipSync(bytes).toString().trimEnd().split("\n").slice(1));
    rows = lines
      .map((line) => line.replace(/"[^"]*"/, "quoted").split(","))
      .filter((cells) => cells.length === 11)
      .map(webRow);
    desk = text(/support/)
      .flatMap((bytes) => bytes.toString().trimEnd().split("\n"))
      .filter((line) => line.endsWith("}"))
      .map((line) => JSON.parse(line))
      .map(({ opened, visitor }) => ({ at: Date.parse(`${opened.replace(" ", "T")}+01:00`), visitor }));
  });

  it("is the same, byte for byte, each time", () => {
    expect(
      demoLog().map((file) =>
        Buffer.from(file.bytes).equals(files.find((one) => one.name === file.name)?.bytes ?? Buffer.of()),
      ),
    ).toEqual(files.map(() => true));
  });

  it("carries the planted faults, each as often as it says", () => {
    expect(lines.length - rows.length).toBeGreaterThanOrEqual(FLAWS.wrongCells);
    expect(rows.filter((row) => Number.isNaN(row.at)).length).toBe(FLAWS.unreadableTimes);
    expect(rows.filter((row) => row.visitor === "").length).toBe(FLAWS.noVisitor);
    const ids = new Set(rows.map((row) => row.id));
    expect(rows.length - ids.size).toBe(FLAWS.copies + FLAWS.correctedFares);
  });

  it("holds what was planted within five standard errors, with the follow-up and the filters of its plan", () => {
    const units = analysed(rows, desk);
    const arm = (name: "list" | "calendar") => units.filter((unit) => unit.arm === name);
    for (const name of ["list", "calendar"] as const) {
      const truth = PLANTED[name];
      expectWithin(
        arm(name),
        (unit) => Number(unit.bookings > 0),
        () => 1,
        truth.bookedShare,
      );
      expectWithin(
        arm(name),
        (unit) => unit.bookings,
        (unit) => Number(unit.bookings > 0),
        truth.bookingsPerBooker,
      );
      expectWithin(
        arm(name),
        (unit) => unit.fare,
        (unit) => unit.bookings,
        truth.farePerBooking,
      );
      expectWithin(
        arm(name),
        (unit) => unit.searches,
        () => 1,
        truth.searchesPerVisitor,
      );
      expectWithin(
        arm(name),
        (unit) => unit.contacts,
        () => 1,
        truth.contactsPerVisitor,
      );
      expectWithin(
        arm(name),
        (unit) => unit.seconds,
        (unit) => unit.searches,
        truth.secondsPerSearch,
      );
    }
    expect(units.length).toBeGreaterThan(40_000);
    // Two thirds of the visitors have a past: rows before their enrolment.
    expectWithin(
      units,
      (unit) => Number(unit.before > 0),
      () => 1,
      2 / 3,
    );
  });

  it("gives an effect that a report must find: z above 4 and the interval above the worthwhile 5%", () => {
    const units = analysed(rows, desk);
    const share = (name: string) => {
      const arm = units.filter((unit) => unit.arm === name);
      const p = arm.filter((unit) => unit.bookings > 0).length / arm.length;
      return { p, v: (p * (1 - p)) / arm.length };
    };
    const [c, t] = [share("list"), share("calendar")];
    expect((t.p - c.p) / Math.sqrt(t.v + c.v)).toBeGreaterThan(4);
    // Delta method for the log of the ratio: close enough to say on which side of 5% the interval lies.
    const half = 1.96 * Math.sqrt(t.v / t.p ** 2 + c.v / c.p ** 2);
    expect(Math.exp(Math.log(t.p / c.p) - half)).toBeGreaterThan(1.05);
  });

  it("has all of its cast: staff, switched visitors, previews, and those outside the enrolment", () => {
    const searches = rows.filter((row) => row.event === "search_opened" && row.arm !== "");
    const first = new Map<string, WebRow>();
    for (const row of searches) if (row.at < (first.get(row.visitor)?.at ?? Infinity)) first.set(row.visitor, row);
    const enrolled = [...first.values()];
    expect(enrolled.filter((row) => row.at < FROM).length).toBe(CAST.trialRun);
    expect(enrolled.filter((row) => row.at >= BEFORE).length).toBe(CAST.afterEnrolment);
    expect(enrolled.filter((row) => row.arm === "map").length).toBe(CAST.previews);
    expect(enrolled.filter((row) => row.staff === "true").length).toBe(CAST.staff);
    const both = new Map<string, Set<string>>();
    for (const row of searches) both.set(row.visitor, (both.get(row.visitor) ?? new Set()).add(row.arm));
    expect([...both.values()].filter((arms) => arms.size > 1).length).toBe(CAST.switched);
  });
});

const FROM = Date.parse("2026-03-02T00:00+01:00");
const BEFORE = Date.parse("2026-03-16T00:00+01:00");

function webRow(cells: string[]): WebRow {
  const [id = "", time = "", visitor = "", event = "", arm = "", , , , fare = "", seconds = "", staff = ""] = cells;
  return { id, at: time.startsWith("2026") ? Date.parse(time) : Number.NaN, visitor, event, arm, fare, seconds, staff };
}

interface Unit {
  readonly arm: string;
  readonly enrolled: number;
  bookings: number;
  fare: number;
  searches: number;
  seconds: number;
  contacts: number;
  before: number;
}

/** The plan's rules once more, by hand: one pass over the rows in the order of time. */
function analysed(rows: readonly WebRow[], desk: readonly { at: number; visitor: string }[]): Unit[] {
  const logEnd = Math.max(...desk.map((row) => row.at));
  const seen = new Set<string>();
  const good = rows
    .filter((row) => !Number.isNaN(row.at) && row.visitor !== "" && /^\d*(\.\d+)?$/.test(row.fare))
    .sort((a, b) => a.at - b.at)
    .filter((row) => !seen.has(row.id) && seen.add(row.id))
    .filter((row) => !row.visitor.startsWith("probe-") && !(row.event === "booking" && row.fare === "0"));
  const units = new Map<string, Unit | null>();
  for (const row of good) {
    if (row.event !== "search_opened" || row.arm === "" || units.has(row.visitor)) continue;
    const counts =
      row.at >= FROM &&
      row.at < BEFORE &&
      row.at + 7 * DAY <= logEnd &&
      row.arm !== "map" &&
      row.staff !== "true" &&
      !row.visitor.startsWith("lt-");
    const unit = {
      arm: row.arm,
      enrolled: row.at,
      bookings: 0,
      fare: 0,
      searches: 0,
      seconds: 0,
      contacts: 0,
      before: 0,
    };
    units.set(row.visitor, counts ? unit : null);
  }
  for (const row of good) {
    const unit = units.get(row.visitor);
    if (unit && row.at < unit.enrolled) unit.before += 1;
    if (!unit || row.at < unit.enrolled || row.at >= unit.enrolled + 7 * DAY) continue;
    if (row.event === "booking") {
      unit.bookings += 1;
      unit.fare += Number(row.fare);
    } else if (row.event === "search_opened") {
      unit.searches += 1;
      unit.seconds += Number(row.seconds);
    }
  }
  for (const { at, visitor } of desk) {
    const unit = units.get(visitor);
    if (unit && at >= unit.enrolled && at < unit.enrolled + 7 * DAY) unit.contacts += 1;
  }
  return [...units.values()].filter((unit) => unit !== null);
}

/** The ratio of totals against the truth, in its own standard errors (Cochran 1977, ch. 6). */
function expectWithin(
  units: readonly Unit[],
  of: (unit: Unit) => number,
  per: (unit: Unit) => number,
  truth: number,
): void {
  const n = units.length;
  const total = (value: (unit: Unit) => number) => units.reduce((sum, unit) => sum + value(unit), 0);
  const ratio = total(of) / total(per);
  const variance = total((unit) => (of(unit) - ratio * per(unit)) ** 2) / (total(per) / n) ** 2 / n;
  expect(Math.abs(ratio - truth)).toBeLessThan(5 * Math.sqrt(variance / n));
}
