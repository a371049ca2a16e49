import { isMap, isScalar, isSeq, type Node, parseDocument } from "yaml";
import type {
  Aggregate,
  Amount,
  ColumnTest,
  Filter,
  LogSource,
  Metric,
  Part,
  Plan,
  Scalar,
  Where,
} from "../../src/plan/types.ts";
import { decimalText, readDecimal } from "./number.ts";
import { namedColumns } from "./plan-columns.ts";
import { clockOf } from "./time.ts";

/**
 * A plan as the oracle reads it: defaults filled in, nothing checked, since every plan of these tests is a valid one.
 * Independent of src/plan, so that a default or a column that one of the two misses is seen.
 */
export function planFromYaml(text: string): Plan {
  const root = parseDocument(text).contents as Node | null;
  const timezone = textAt(root, "timezone") ?? "UTC";
  const clock = clockOf(timezone);
  const enrolment = at(root, "enrolment");
  const instant = (key: string) => {
    const value = textAt(enrolment, key);
    return value === null ? null : clock.read(value);
  };
  const filters = list(at(root, "filters")).map(filterOf);
  const metrics = list(at(root, "metrics")).map(metricOf);
  const days = numberAt(at(root, "follow-up"), "days");
  return {
    experiment: textAt(root, "experiment") ?? "",
    question: textAt(root, "question") ?? "",
    unitCalled: {
      one: textAt(at(root, "unit-called"), "one") ?? "unit",
      many: textAt(at(root, "unit-called"), "many") ?? "units",
    },
    log: list(at(root, "log")).map(sourceOf),
    timezone,
    enrolment: {
      event: textAt(enrolment, "event"),
      fromUs: instant("from"),
      beforeUs: instant("before"),
      fromText: textAt(enrolment, "from"),
      beforeText: textAt(enrolment, "before"),
      inTwoVariants: textAt(enrolment, "in-two-variants") === "exclude" ? "exclude" : "first",
    },
    variants: list(at(root, "variants")).map((node) => ({
      name: textAt(node, "name") ?? "",
      what: textAt(node, "what"),
      isControl: textAt(node, "control") === "true",
      allocation: numberAt(node, "allocation") ?? 1,
    })),
    followUp:
      days === null
        ? null
        : { days, incomplete: textAt(at(root, "follow-up"), "incomplete") === "keep" ? "keep" : "exclude" },
    metrics,
    filters,
    subgroups: list(at(root, "subgroups")).map(plain),
    askedAfterwards: { subgroups: [], metrics: [], columns: [], numericColumns: [] },
    decision: { confidence: 0.95, power: 0.8, adoptWhen: "shown-better", primaries: "all", interval: "normal" },
    plannedUnits: numberAt(at(root, "planned"), "units"),
    looks: null,
    incidents: list(at(root, "incidents")).map((node) => ({
      name: textAt(node, "name") ?? "",
      what: textAt(node, "what"),
      fromUs: clock.read(textAt(node, "from") ?? "") ?? 0n,
      beforeUs: clock.read(textAt(node, "before") ?? "") ?? 0n,
      fromText: textAt(node, "from") ?? "",
      beforeText: textAt(node, "before") ?? "",
      where: whereOf(at(node, "where")),
    })),
    forecast: null,
    registered: null,
    texts: { ended: textAt(root, "ended"), owner: null, link: null, limits: null, notes: null, decided: null },
    ...namedColumns(root),
  };
}

function sourceOf(node: Node): LogSource {
  const files = at(node, "files");
  const columns = at(node, "columns");
  return {
    files: isSeq(files) ? list(files).map(plain) : [plain(files)],
    columns: {
      unit: textAt(columns, "unit") ?? "",
      time: textAt(columns, "time"),
      event: textAt(columns, "event"),
      variant: textAt(columns, "variant"),
      eventId: textAt(columns, "event-id"),
    },
  };
}

function metricOf(node: Node): Metric {
  const cap = at(node, "cap");
  const quantile = textAt(cap, "quantile");
  const limit = textAt(cap, "at");
  const share = textAt(node, "quantile");
  const per = at(node, "per");
  return {
    name: textAt(node, "name") ?? "",
    role: (textAt(node, "role") ?? "secondary") as Metric["role"],
    summary: textAt(node, "summary") as Metric["summary"],
    of: partOf(at(node, "of")),
    per: per === null ? null : partOf(per),
    quantile: share === null ? null : decimal(share),
    unitOfMeasure: textAt(node, "in"),
    goodIs: textAt(node, "good-is") === "lower" ? "lower" : "higher",
    worthwhile: amountOf(at(node, "worthwhile")),
    expected: amountOf(at(node, "expected")),
    margin: amountOf(at(node, "margin")),
    cap:
      quantile !== null
        ? { kind: "quantile", q: decimal(quantile) }
        : limit !== null
          ? { kind: "at", at: decimal(limit) }
          : null,
    adjustFor: covariateOf(at(node, "adjust-for")),
    withoutRows: textAt(node, "without-rows") === "leave-out" ? "leave-out" : "zero",
  };
}

function covariateOf(node: Node | null): Metric["adjustFor"] {
  const column = textAt(node, "column");
  if (column !== null) return { kind: "column", column };
  const days = numberAt(node, "days-before");
  return days === null ? null : { kind: "days-before", days };
}

const WITH_COLUMN = ["sum", "max", "min", "first", "last"] as const;

function partOf(node: Node | null): Part {
  return { event: textAt(node, "event"), where: whereOf(at(node, "where")), aggregate: aggregateOf(node) };
}

function aggregateOf(node: Node | null): Aggregate {
  for (const kind of WITH_COLUMN) {
    const column = textAt(node, kind);
    if (column !== null) return { kind, column };
  }
  return textAt(node, "days") === "true" ? { kind: "days" } : { kind: "count" };
}

function filterOf(node: Node): Filter {
  const name = textAt(node, "name") ?? "";
  const why = textAt(node, "why");
  const listedIn = textAt(node, "listed-in");
  if (textAt(node, "drop") === "rows") return { name, why, drop: "rows", where: whereOf(at(node, "where")) };
  if (listedIn !== null) return { name, why, drop: "units", listedIn };
  const when = textAt(node, "when") === "ever" ? "ever" : "at-enrolment";
  return { name, why, drop: "units", when, where: whereOf(at(node, "where")) };
}

function whereOf(node: Node | null): Where {
  return pairs(node).flatMap(([column, value]) => {
    if (!isMap(value)) return [{ column, kind: "in", values: scalars(value) } as ColumnTest];
    return pairs(value).map(([kind, wanted]) => testOf(column, kind, wanted));
  });
}

function testOf(column: string, kind: string, wanted: Node | null): ColumnTest {
  switch (kind) {
    case "in":
    case "not":
      return { column, kind, values: scalars(wanted) };
    case "above":
    case "below":
    case "at-least":
    case "at-most":
      return { column, kind, value: decimal(plain(wanted)) };
    case "missing":
      return { column, kind, value: plain(wanted) === "true" };
    case "matches":
      return { column, kind, patterns: isSeq(wanted) ? list(wanted).map(plain) : [plain(wanted)] };
    default:
      throw new Error(`not a test of a where: ${kind}`);
  }
}

function scalars(node: Node | null): Scalar[] {
  return (isSeq(node) ? list(node) : [node]).map((item) => {
    const value = isScalar(item) ? item.value : null;
    if (typeof value === "boolean") return { kind: "boolean", value };
    return typeof value === "number"
      ? { kind: "number", value: decimal(plain(item)) }
      : { kind: "text", text: plain(item) };
  });
}

function amountOf(node: Node | null): Amount | null {
  const [pair] = pairs(node);
  if (pair === undefined) return null;
  return { kind: pair[0] === "relative" ? "relative" : "absolute", value: Number(decimal(plain(pair[1]))) };
}

/** In plain digits; "5%" is "0.05". */
function decimal(text: string): string {
  const percent = text.endsWith("%");
  const value = readDecimal(percent ? text.slice(0, -1) : text);
  if (value === null) throw new Error(`not a number of a plan: ${text}`);
  return decimalText(percent ? { ...value, lead: value.lead - 2 } : value);
}

function at(node: Node | null, key: string): Node | null {
  return pairs(node).find(([name]) => name === key)?.[1] ?? null;
}

function pairs(node: Node | null): [string, Node | null][] {
  if (!isMap(node)) return [];
  return node.items.map((pair) => [plain(pair.key as Node), pair.value as Node | null]);
}

function list(node: Node | null): Node[] {
  return isSeq(node) ? (node.items as Node[]) : [];
}

function textAt(node: Node | null, key: string): string | null {
  const found = at(node, key);
  return found === null ? null : plain(found);
}

function numberAt(node: Node | null, key: string): number | null {
  const text = textAt(node, key);
  return text === null ? null : Number(text);
}

/** A scalar's text; a number as it is written. */
function plain(node: Node | null): string {
  if (!isScalar(node)) throw new Error(`expected a scalar in the plan, found ${String(node)}`);
  return typeof node.value === "number" ? (node.source ?? String(node.value)) : String(node.value);
}
