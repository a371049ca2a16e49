import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { covariateArms } from "../../src/cells/index.ts";
import type { JointSums, PowerSums } from "../../src/cells/types.ts";
import type { CellTable, JointTable } from "../../src/engine/types.ts";
import { nano } from "../stats/ordered.ts";
import { covariateGroups, type Pairs } from "../stats/pairs.ts";

/** One unit: its variant (0 or 1), its bucket, y and x. */
type Unit = readonly [variant: number, bucket: number, y: number, x: number | null];

const unit: fc.Arbitrary<Unit> = fc.tuple(
  fc.nat(1),
  fc.nat(4),
  fc.integer({ min: -500, max: 500 }).map((y) => y / 4),
  fc.option(fc.integer({ min: 0, max: 1e6 }), { nil: null }),
);

const pairs = (units: readonly Unit[]): Pairs => units.map(([, , y, x]) => [y, x]);
/** A sum in two integers; the low one need not lie under 2^60, for the engine's is a sum over units. */
const high = (sum: bigint) => (sum >> 60n) - 3n;
const low = (sum: bigint) => sum - (high(sum) << 60n);

/** Cells as an engine gives them: one row a variant and bucket, left out where no unit of it has the value. */
function cells(units: readonly Unit[]) {
  const keys = [...new Set(units.map(([variant, bucket]) => `${variant} ${bucket}`))];
  const places = keys
    .map((key) => key.split(" ").map(Number))
    .map(([variant = 0, bucket = 0]) => ({ variant, bucket }));
  const groups = places.map(({ variant, bucket }) => pairs(units.filter(([v, b]) => v === variant && b === bucket)));
  const arms = covariateGroups(groups).map((arm, i) => ({ ...arm, ...(places[i] ?? { variant: 0, bucket: 0 }) }));
  const there = arms.filter(({ joint }) => joint.n > 0);
  return {
    of: cellTable(arms.map((arm) => ({ ...arm, sums: arm.value }))),
    covariate: {
      x: cellTable(
        there.map((arm) => ({ ...arm, sums: arm.covariate })),
        arms[0]?.covariate,
      ),
      joint: jointTable(there, arms[0]?.joint),
    },
  };
}

function armsOf(units: readonly Unit[], variants: number) {
  const { of, covariate } = cells(units);
  return covariateArms(of, covariate, variants);
}

type Place = { readonly variant: number; readonly bucket: number };

function cellTable(rows: readonly (Place & { readonly sums: PowerSums })[], measure = rows[0]?.sums): CellTable {
  const power = (k: 0 | 1 | 2 | 3, part: (sum: bigint) => bigint) => rows.map(({ sums }) => part(sums.powers[k]));
  return {
    pivot: measure?.pivot ?? "0",
    scale: measure?.scale ?? 1,
    variant: rows.map(({ variant }) => variant),
    bucket: rows.map(({ bucket }) => bucket),
    n: rows.map(({ sums }) => sums.n),
    high1: power(0, high),
    high2: power(1, high),
    high3: power(2, high),
    high4: power(3, high),
    low1: power(0, low),
    low2: power(1, low),
    low3: power(2, low),
    low4: power(3, low),
    total: rows.map(({ sums }) => sums.total ?? 0n),
    smallest: rows.map(({ sums }) => nano(sums.smallest ?? 0)),
    largest: rows.map(({ sums }) => nano(sums.largest ?? 0)),
  };
}

function jointTable(rows: readonly (Place & { readonly joint: JointSums })[], measure?: JointSums): JointTable {
  const sum = (jk: "s10" | "s01" | "s20" | "s11" | "s02", part: (sum: bigint) => bigint) =>
    rows.map(({ joint }) => part(joint[jk]));
  return {
    pivots: measure?.pivots ?? ["0", "0"],
    scales: measure?.scales ?? [1, 1],
    variant: rows.map(({ variant }) => variant),
    bucket: rows.map(({ bucket }) => bucket),
    n: rows.map(({ joint }) => joint.n),
    high10: sum("s10", high),
    high01: sum("s01", high),
    high20: sum("s20", high),
    high11: sum("s11", high),
    high02: sum("s02", high),
    low10: sum("s10", low),
    low01: sum("s01", low),
    low20: sum("s20", low),
    low11: sum("s11", low),
    low02: sum("s02", low),
    totalY: rows.map(({ joint }) => joint.totals[0]),
    totalX: rows.map(({ joint }) => joint.totals[1]),
  };
}

describe("the arms of a covariate", () => {
  it("are the exact sums over their buckets, however the units fell into buckets", () => {
    fc.assert(
      fc.property(fc.array(unit, { minLength: 1, maxLength: 30 }), (units) => {
        const of = (variant: number) => pairs(units.filter(([v]) => v === variant));
        expect(armsOf(units, 3)).toEqual(covariateGroups([of(0), of(1), of(2)]));
      }),
    );
  });

  it("have sums of nothing where no unit has x", () => {
    const [arm] = armsOf([[0, 1, 5, null]], 1);
    expect(arm).toMatchObject({ value: { n: 1 }, covariate: { n: 0 }, joint: { n: 0, s11: 0n, totals: [0n, 0n] } });
  });
});
