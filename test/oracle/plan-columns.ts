import { isMap, isScalar, isSeq, type Node } from "yaml";

/** Columns that a plan names other than as time, event or variant, in the order of first mention in its text. */
export interface NamedColumns {
  readonly columns: readonly string[];
  /** Of these, the ones that a metric sums, takes max, min, first or last of, or adjusts for. */
  readonly numericColumns: readonly string[];
}

const NUMERIC = ["sum", "max", "min", "first", "last"];

export function namedColumns(root: Node | null): NamedColumns {
  const all = mentionsIn(root, []);
  // An incident changes nothing of who is counted: what only incidents name decides no tie.
  const mentions = [...all.filter(({ ofIncident }) => !ofIncident), ...all.filter(({ ofIncident }) => ofIncident)];
  const distinct = (found: readonly Mention[]) => [...new Set(found.map(({ column }) => column))];
  return { columns: distinct(mentions), numericColumns: distinct(mentions.filter(({ numeric }) => numeric)) };
}

interface Mention {
  readonly column: string;
  readonly numeric: boolean;
  readonly ofIncident: boolean;
}

function mentionsIn(node: Node | null, path: readonly string[]): Mention[] {
  if (isSeq(node)) return (node.items as Node[]).flatMap((item) => mentionsIn(item, path));
  if (!isMap(node)) return [];
  const ofIncident = path[0] === "incidents";
  return node.items.flatMap((pair) => {
    const key = String((pair.key as { value?: unknown }).value);
    const value = pair.value as Node | null;
    if (key === "subgroups" && path.length === 0)
      return namesIn(value).map((column) => ({ column, numeric: false, ofIncident }));
    if (key === "where") return keysOf(value).map((column) => ({ column, numeric: false, ofIncident }));
    if (!isScalar(value)) return mentionsIn(value, [...path, key]);
    const column = String(value.value);
    const inside = path.at(-1);
    if (inside === "columns" && (key === "unit" || key === "event-id")) return [{ column, numeric: false, ofIncident }];
    if (inside === "adjust-for" && key === "column") return [{ column, numeric: true, ofIncident }];
    if ((inside === "of" || inside === "per") && NUMERIC.includes(key)) return [{ column, numeric: true, ofIncident }];
    return [];
  });
}

function namesIn(node: Node | null): string[] {
  return isSeq(node) ? (node.items as Node[]).map((item) => String((item as { value?: unknown }).value)) : [];
}

function keysOf(node: Node | null): string[] {
  return isMap(node) ? node.items.map((pair) => String((pair.key as { value?: unknown }).value)) : [];
}
