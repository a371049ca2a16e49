import type { Problem } from "../types.ts";
import { type Item, mapping } from "./loose.ts";

const AGGREGATES = ["count", "sum", "days", "max", "min", "first", "last"];
const WITHOUT_ZERO = ["max", "min", "first", "last"]; // of no rows there is none

/** What the summary of a metric asks for and allows. A summary that could not be read allows all. */
export function summaryRules(metric: Item): readonly Problem[] {
  const { summary } = metric.data;
  const parts = ["of", "per"].flatMap((key): readonly Item[] => {
    const data = mapping(metric.data[key]);
    return data === null ? [] : [{ path: [...metric.path, key], data }];
  });
  return [
    ...(summary === "proportion" ? parts.flatMap(countOnly) : parts.flatMap(oneAggregate)),
    ...belongsTo(metric, "per", "ratio-of-totals", "Add per, the denominator, such as per: {event: search_opened}."),
    ...belongsTo(metric, "quantile", "quantile", "Add which one, such as quantile: 0.95."),
    ...cap(metric),
    ...withoutRows(metric, parts),
    ...shareOfUnits(metric),
    ...covariate(metric),
  ];
}

function countOnly({ path, data }: Item): readonly Problem[] {
  const others = AGGREGATES.filter((key) => key !== "count" && key in data);
  return others.map((key) => {
    const message = `A proportion counts units with a row, so it takes no ${key}. Remove it, or write summary: mean.`;
    return { path: [...path, key], at: "key", message };
  });
}

function oneAggregate({ path, data }: Item): readonly Problem[] {
  const [first, ...others] = Object.keys(data).filter((key) => AGGREGATES.includes(key));
  return others.map((key) => {
    const message = `One figure is taken of the rows, and ${first} stands here already. Remove one of them.`;
    return { path: [...path, key], at: "key", message };
  });
}

/** A key that one summary needs and the others do not know. */
function belongsTo({ path, data }: Item, key: string, summary: string, remedy: string): readonly Problem[] {
  if (data.summary === summary && !(key in data)) {
    return [{ path, at: "key", message: `summary: ${summary} needs ${key}. ${remedy}` }];
  }
  if (!isSummary(data.summary) || data.summary === summary || !(key in data)) return [];
  const message = `${key} is for summary: ${summary}; this one is ${data.summary}. Remove it, or change the summary.`;
  return [{ path: [...path, key], at: "key", message }];
}

function cap({ path, data }: Item): readonly Problem[] {
  if (!("cap" in data) || (data.summary !== "proportion" && data.summary !== "quantile")) return [];
  const message = `A cap changes nothing that a ${data.summary} looks at. Remove it; it is for means and ratios of totals.`;
  return [{ path: [...path, "cap"], at: "key", message }];
}

function withoutRows({ path, data }: Item, parts: readonly Item[]): readonly Problem[] {
  const { summary } = data;
  const at = [...path, "without-rows"];
  if (data["without-rows"] === "leave-out") {
    const why: Readonly<Record<string, string>> = {
      "ratio-of-totals": "A ratio of totals adds up all units; one without rows adds 0. Write 0, or remove this.",
      proportion: "With them left out every unit would have a row, and the proportion be 1. Write 0, or remove this.",
    };
    const message = why[String(summary)];
    return message === undefined ? [] : [{ path: at, at: "value", message }];
  }
  if ("without-rows" in data || !isSummary(summary) || summary === "proportion") return [];
  const undefinedAlone = parts.flatMap((part) =>
    WITHOUT_ZERO.filter((key) => key in part.data).map((key) => ({ path: [...part.path, key], key })),
  );
  const [first] = undefinedAlone;
  if (first === undefined) return [];
  const choice = summary === "ratio-of-totals" ? "without-rows: 0" : "without-rows: leave-out, or without-rows: 0";
  const message = `A unit without rows has no ${first.key}. Say what becomes of it: add ${choice}.`;
  return [{ path: first.path, at: "key", message }];
}

/** An absolute amount of a proportion is a share of the units: 0.002 or 0.2%; of all else it is in the metric's unit. */
function shareOfUnits({ path, data }: Item): readonly Problem[] {
  return ["worthwhile", "expected", "margin"].flatMap((key): readonly Problem[] => {
    const absolute = mapping(data[key])?.absolute;
    const place = [...path, key, "absolute"];
    if (data.summary === "proportion" && typeof absolute === "number" && absolute > 1) {
      const message = `A proportion lies between 0 and 1. For ${absolute} of 100 units write ${absolute}%.`;
      return [{ path: place, at: "value", message }];
    }
    if (!isSummary(data.summary) || data.summary === "proportion" || typeof absolute !== "string") return [];
    if (!absolute.endsWith("%")) return [];
    const message =
      "An absolute amount is in the metric's own unit. Write a number, or write relative for a percentage.";
    return [{ path: place, at: "value", message }];
  });
}

function covariate({ path, data }: Item): readonly Problem[] {
  if (!("adjust-for" in data) || (data.summary !== "quantile" && data.summary !== "ratio-of-totals")) return [];
  const message = `adjust-for is for means and proportions, this summary is ${data.summary}. Remove it.`;
  return [{ path: [...path, "adjust-for"], at: "key", message }];
}

function isSummary(summary: unknown): summary is string {
  return ["mean", "proportion", "quantile", "ratio-of-totals"].some((known) => known === summary);
}
