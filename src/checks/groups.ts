import type { ByVariant } from "../engine/types.ts";
import type { Plan } from "../plan/types.ts";
import { type ChiSquareTest, holm, independence, pearson } from "../stats/index.ts";
import { added } from "./flow.ts";
import { sum } from "./ledger.ts";
import { byP } from "./limits.ts";
import { plannedShares } from "./planned-shares.ts";

const EXPECTED_AT_LEAST = 5; // METHODS 7: days under that are pooled

/**
 * Is the split the same in every group of units (the days, the levels of a column)? Pearson's chi-square of the group x arm
 * table; groups with an expected count under 5 are pooled, and what is then still too small joins the smallest group.
 * @returns null where under two groups or arms are left
 */
export function groupsAlike(groups: readonly ByVariant[]): ChiSquareTest | null {
  const expected = smallestExpected(groups);
  const large = groups.filter((group) => expected(group) >= EXPECTED_AT_LEAST);
  const pooled = added(groups.filter((group) => sum(group) > 0 && expected(group) < EXPECTED_AT_LEAST));
  const rows =
    sum(pooled) === 0 ? large : expected(pooled) >= EXPECTED_AT_LEAST ? [...large, pooled] : joined(large, pooled);
  const found = independence(rows);
  return found.df === 0 ? null : found;
}

/** The smallest expected count of a group, by the arms' shares of all groups. */
function smallestExpected(groups: readonly ByVariant[]): (group: ByVariant) => number {
  const arms = added(groups).filter((units) => units > 0);
  const share = Math.min(...arms) / sum(arms);
  return (group) => sum(group) * share;
}

function joined(large: readonly ByVariant[], pooled: ByVariant): ByVariant[] {
  const [smallest, ...others] = large.toSorted((a, b) => sum(a) - sum(b));
  return smallest === undefined ? [] : [added([smallest, pooled]), ...others];
}

/**
 * The groups that do not split as planned, Holm's p under 0.01 over all that are large enough; if none does by itself, the
 * one that departs most from the split of all.
 * @returns their places, in order
 */
export function groupsOff(plan: Plan, groups: readonly ByVariant[]): number[] {
  const shares = plannedShares(plan);
  const tests = groups.map((group) => {
    const least = Math.min(...shares) * sum(group);
    return least < EXPECTED_AT_LEAST ? null : pearson(group, shares);
  });
  const adjusted = holm(tests.map((test) => test?.p ?? null));
  const off = groups.flatMap((_, i) => {
    const p = adjusted[i];
    return p == null || byP(p) === "pass" ? [] : [i];
  });
  return off.length > 0 ? off : farthest(groups);
}

function farthest(groups: readonly ByVariant[]): number[] {
  const all = added(groups);
  const total = sum(all);
  const distance = (group: ByVariant) =>
    sum(
      group.map((units, v) => {
        const expected = (sum(group) * (all[v] ?? 0)) / total;
        return expected === 0 ? 0 : (units - expected) ** 2 / expected;
      }),
    );
  const [first] = groups.map((group, i) => ({ i, away: distance(group) })).sort((a, b) => b.away - a.away);
  return first === undefined ? [] : [first.i];
}
