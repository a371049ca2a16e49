import type { Problem } from "../types.ts";
import type { Path } from "../yaml.ts";
import { allMetrics, type Item, items, type Loose, mapping, parts } from "./loose.ts";

/** What the entries of `log` must hold together, and what the plan may ask of a log without events or without time. */
export function logRules(plan: Loose): readonly Problem[] {
  const entries = items(plan, "log").flatMap(({ path, data }): readonly Item[] => {
    const columns = mapping(data.columns);
    return columns === null ? [] : [{ path: [...path, "columns"], data: columns }];
  });
  // an entry without columns is told by the schema; what they would hold is not known
  if (entries.length === 0 || entries.length !== (plan.log as readonly unknown[]).length) return [];

  const has = (column: string) => entries.some(({ data }) => column in data);
  return [
    ...entries.flatMap(sameColumn),
    ...(has("time") ? entries.flatMap(withoutTime) : timeNeeds(plan).map(withoutAnyTime)),
    ...(has("event") ? [] : eventNeeds(plan).map(withoutAnyEvent)),
    ...(has("variant") ? [] : [NO_VARIANT]),
  ];
}

const NO_VARIANT: Problem = {
  path: ["log"],
  at: "key",
  message: "No entry of the log names a column of the variant. Add variant to the columns of the one that enrols.",
};

function sameColumn({ path, data }: Item): readonly Problem[] {
  if (typeof data.unit !== "string" || data.unit !== data["event-id"]) return [];
  const message =
    "The event-id tells the rows of one unit apart, so it cannot be the column of the unit. Name another, or remove it.";
  return [{ path: [...path, "event-id"], at: "value", message }];
}

function withoutTime({ path, data }: Item): readonly Problem[] {
  if ("time" in data) return [];
  const message =
    "Either every entry of the log has a time or none. Add time to these columns, or remove it from the others.";
  return [{ path, at: "key", message }];
}

function withoutAnyTime(path: Path): Problem {
  const message = `${String(path.at(-1))} needs time, and the log has none. Add time to the columns of the log, or remove this.`;
  return { path, at: "key", message };
}

function withoutAnyEvent(path: Path): Problem {
  const message = "The log has no column of events. Add event to its columns, or remove this.";
  return { path, at: "key", message };
}

const OF_TIME = ["days", "first", "last"];

function timeNeeds(plan: Loose): readonly Path[] {
  const enrolment = mapping(plan.enrolment) ?? {};
  const covariates = allMetrics(plan).filter(({ data }) => "days-before" in (mapping(data["adjust-for"]) ?? {}));
  return [
    ...["from", "before"].filter((key) => key in enrolment).map((key): Path => ["enrolment", key]),
    ...["follow-up", "incidents"].filter((key) => key in plan).map((key): Path => [key]),
    ...parts(plan).flatMap(({ path, data }) => OF_TIME.filter((key) => key in data).map((key): Path => [...path, key])),
    ...covariates.map(({ path }): Path => [...path, "adjust-for", "days-before"]),
  ];
}

function eventNeeds(plan: Loose): readonly Path[] {
  return [
    ...("event" in (mapping(plan.enrolment) ?? {}) ? [["enrolment", "event"]] : []),
    ...parts(plan)
      .filter(({ data }) => "event" in data)
      .map(({ path }): Path => [...path, "event"]),
  ];
}
