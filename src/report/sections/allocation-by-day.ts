import { plannedShares } from "../../checks/index.ts";
import type { Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { normalCritical } from "../../stats/index.ts";
import { count, dateText, dayOfEpoch, fixed, percent, plain, quoted } from "../../words/index.ts";
import { type AllocationDay, allocation } from "../charts/allocation.ts";
import { draw } from "../charts/draw.ts";
import type { AccrualPart } from "./accrual.ts";

/** Of a hundred days that split as planned, one lies beyond. */
const BEYOND = 0.01;

/** How the units of each day of enrolment split, one part a variant but the control; nothing where there is one day or no time. */
export async function allocationParts(plan: Plan, { facts }: Reduction): Promise<AccrualPart[]> {
  const days = (facts.soundness.days ?? []).map(({ day, ended }) => ({
    day,
    enrolled: plan.variants.map((_, v) => ended.reduce((sum, line) => sum + (line[v] ?? 0), 0)),
  }));
  if (days.length < 2) return [];
  const shares = plannedShares(plan);
  const parts: AccrualPart[] = [];
  for (const [v, { name, isControl }] of plan.variants.entries()) {
    if (!isControl) parts.push(await partOf(plan, name, shares[v] ?? 0, days, v, `allocation-${parts.length + 1}`));
  }
  return parts;
}

interface Day {
  readonly day: number;
  readonly enrolled: readonly number[];
}

async function partOf(
  plan: Plan,
  variant: string,
  planned: number,
  days: readonly Day[],
  v: number,
  id: string,
): Promise<AccrualPart> {
  const { many } = plan.unitCalled;
  const shown = days.flatMap(({ day, enrolled }): AllocationDay[] => {
    const n = enrolled.reduce((sum, units) => sum + units, 0);
    if (n === 0) return [];
    const room = normalCritical(BEYOND) * Math.sqrt((planned * (1 - planned)) / n);
    const [low, high] = [Math.max(0, planned - room), Math.min(1, planned + room)];
    return [{ day, share: (enrolled[v] ?? 0) / n, low, high }];
  });
  const beyond = shown.filter(({ share, low, high }) => share < low || share > high).length;
  const caption = `Share of the ${many} enrolled that were given ${quoted(variant)}, by day`;
  const outside = beyond === 0 ? "none lies" : `${beyond} ${beyond === 1 ? "lies" : "lie"}`;
  const found = `Planned were ${percent(planned)}; of ${shown.length} days ${outside} beyond what chance allows on 99 of 100.`;
  const spec = allocation(shown, planned, {
    xTitle: "day of enrolment",
    xLabel: (day) => (Number.isInteger(day) ? shortDay(day) : ""),
    yLabel: (share) => `${plain(Number((100 * share).toPrecision(6)))}%`,
  });
  return {
    id,
    title: `${quoted(variant)}: share of the ${many} enrolled, by day`,
    sentences: [found, "Whether all days together split as planned is judged by the check above."],
    drawing: {
      caption,
      reading:
        "Square: the share on that day. Dotted: planned. Dashed: where the split is as planned, 99 of 100 days lie between.",
      drawing: await draw(spec, `${id}-drawing`, { title: caption, description: found }),
    },
    caption,
    head: "day",
    columns: [`${many} enrolled`, `with ${variant}`, "share", "by chance, low", "by chance, high"],
    rows: shown.map(({ day, share, low, high }) => {
      const enrolled = days.find((one) => one.day === day)?.enrolled ?? [];
      return {
        day: dateText(dayOfEpoch(day)),
        cells: [
          count(enrolled.reduce((sum, units) => sum + units, 0)),
          count(enrolled[v] ?? 0),
          ...[share, low, high].map((figure) => `${fixed(100 * figure, 1)}%`),
        ],
      };
    }),
  };
}

/** "2 March". */
function shortDay(day: number): string {
  return dateText(dayOfEpoch(day)).replace(/ \d+$/, "");
}
