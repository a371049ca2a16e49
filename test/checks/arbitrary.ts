import fc from "fast-check";
import type { Reduction } from "../../src/engine/types.ts";
import type { Plan } from "../../src/plan/types.ts";
import { metricOf, planOf, reductionOf, rowFilter, unitFilter, variantsOf } from "./make.ts";

/** A plan with two or three variants and some of what draws checks, and a log under it that adds up. */
export const arbitraryLog: fc.Arbitrary<{ plan: Plan; reduction: Reduction }> = fc
  .record({
    third: fc.boolean(),
    equal: fc.boolean(),
    exclude: fc.boolean(),
    followUp: fc.boolean(),
    ever: fc.boolean(),
    one: fc.boolean(),
    enrolled: fc.array(fc.oneof(fc.constant(0), fc.nat(20), fc.nat(20_000)), { minLength: 3, maxLength: 3 }),
    parts: fc.array(fc.array(fc.integer({ min: 0, max: 24 }), { minLength: 3, maxLength: 3 }), {
      minLength: 7,
      maxLength: 7,
    }),
    rows: fc.array(fc.nat(300), { minLength: 4, maxLength: 4 }),
    unknownVariant: fc.oneof(fc.constant(0), fc.nat(300)),
    missing: fc.boolean(),
    days: fc.integer({ min: 0, max: 4 }),
    lost: fc.array(fc.integer({ min: 0, max: 400 }), { minLength: 6, maxLength: 6 }),
  })
  .map((made) => {
    const variants = variantsOf(made.equal ? { list: 1, calendar: 1, map: 1 } : { list: 2, calendar: 1, map: 1 });
    const inTwoVariants = made.exclude ? "exclude" : "first";
    const plan = planOf({
      unitCalled: made.one ? { one: "account", many: "accounts" } : { one: "visitor", many: "visitors" },
      variants: made.third ? variants : variants.slice(0, 2),
      enrolment: { ...planOf().enrolment, inTwoVariants },
      plannedUnits: made.equal ? 20_000 : null,
      followUp: made.followUp ? { days: 1, incomplete: "exclude" } : null,
      filters: [rowFilter("old site"), unitFilter("robots", made.ever ? "ever" : "at-enrolment")],
      metrics: [
        metricOf({ name: "Booked", role: "primary" }),
        metricOf({ name: "Page time", summary: "mean", withoutRows: "leave-out" }),
      ],
    });
    const enrolled = plan.variants.map((_, i) => made.enrolled[i] ?? 0);
    // up to a fifth of each arm on each line, so that the analysed are never fewer than none
    const share = (k: number) => enrolled.map((n, i) => Math.floor((n * (made.parts[k]?.[i] ?? 0)) / 120));
    const ended = {
      ...(made.exclude ? { switched: share(0) } : {}),
      "filter:robots": share(1),
      ...(made.followUp ? { "follow-up": share(2) } : {}),
    };
    const [noHours, silent, outside, taken, byMetric, unfollowed] = made.lost;
    const part = (n: number, of: number) => Math.floor((n * of) / 500);
    const analysed = enrolled.map((n, i) => n - Object.values(ended).reduce((total, own) => total + (own[i] ?? 0), 0));
    const lines = [...Object.values(ended), analysed];
    /** All on the first days, in shares that differ by arm where something is lost. */
    const days = Array.from({ length: made.days }, (_, d) => ({
      day: 20_514 + d * (d > 2 ? 2 : 1),
      ended: lines.map((counts) =>
        counts.map((n, v) => (d === 0 && v === 0 ? part(n, silent ?? 0) : Math.floor(n / made.days))),
      ),
    }));
    const hours = Array.from({ length: 72 }, (_, h) => {
      const own = h === 30 ? 0 : 25;
      return {
        day: 20_514 + Math.floor(h / 24),
        hour: h % 24,
        rows: own,
        byVariant: enrolled.map((_n, v) => (h === 40 && v === 0 ? 0 : own)),
      };
    });
    const soundness = {
      days: made.days === 0 ? null : days,
      beforeLines: ["rejected", "duplicate", "filter:old site"].map((line, i) => ({
        line,
        byVariant: enrolled.map((n, v) => n + (v === 0 && i < 2 ? part(n, taken ?? 0) : 0)),
      })),
      enrolling: { units: enrolled.map((n) => n + 400), taken: [enrolled.map((_, v) => (v === 0 ? (taken ?? 0) : 1))] },
      byMetricRows: made.one
        ? null
        : {
            units: Math.min(
              byMetric ?? 0,
              enrolled.reduce((a, b) => a + b, 0),
            ),
            events: [{ value: "booking", rows: 1 }],
          },
      keptUnfollowed: null,
      valuesOfFilters:
        made.parts[1]?.[0] === 0
          ? [{ filter: "robots", columns: [{ column: "robot", values: [{ value: "ja", rows: 3 }] }] }]
          : [],
      sources: noHours === 0 ? [] : [{ source: 0, outside: outside ?? 0, hours }],
      silences: noHours === 0 ? [] : [{ source: 0, variant: 0, first: 40, last: 40, others: unfollowed ?? 0 }],
    };
    const [rejected = 0, duplicate = 0, filtered = 0, differ = 0] = made.rows;
    const reduction = reductionOf(plan, {
      enrolled,
      ended,
      unknownVariant: made.unknownVariant,
      rows: { rejected, duplicate, "filter:old site": filtered },
      leftOut: { "Page time": share(3) },
      soundness,
      facts: {
        switched: share(0),
        withRejected: share(4),
        withDuplicate: share(5),
        duplicateIds: duplicate,
        copiesThatDiffer: Math.min(differ, duplicate),
        copiesOfOtherUnits: made.one ? Math.min(1, duplicate) : 0,
        missingEvents: made.missing ? ["booking"] : [],
        events: [
          { value: "search_opened", rows: 6000 },
          { value: made.missing ? "bookings" : "booking", rows: 700 },
        ],
        variants: [...variants.map(({ name }) => ({ value: name, rows: 10 })), { value: "calender", rows: 1 }],
      },
    });
    return { plan, reduction };
  });
