import { isMap, isSeq } from "yaml";
import { keyText, type Path, resolved, type YamlText } from "./yaml.ts";

/** A place where the plan names a column of the log. */
export interface Mention {
  readonly name: string;
  readonly path: Path;
  /** A column of a `where` is a key, all others are values. */
  readonly at: "key" | "value";
  /** What `columns` of one entry of the log calls ours: it must be in every file of that entry. */
  readonly role: "unit" | "time" | "event" | "variant" | "event-id" | null;
  /** The values must be numbers. */
  readonly isNumeric: boolean;
}

const AFTERWARDS = "asked-afterwards";

/** Those that the plan made before the test, without what was asked afterwards. */
export const planned = (mentions: readonly Mention[]): readonly Mention[] =>
  mentions.filter(({ path }) => path[0] !== AFTERWARDS);

export const askedAfterwards = (mentions: readonly Mention[]): readonly Mention[] =>
  mentions.filter(({ path }) => path[0] === AFTERWARDS);

/** What is asked afterwards is written as what is planned, one level deeper. */
const asPlanned = (path: Path): Path => (path[0] === AFTERWARDS ? path.slice(1) : path);

/** Every mention of a column, in the order of the YAML text. What is not a text is no mention; the schema reports it. */
export function columnMentions(yaml: YamlText): readonly Mention[] {
  const mentions: Mention[] = [];
  const visit = (node: unknown, path: Path): void => {
    const target = resolved(yaml, node);
    if (isSeq(target)) target.items.forEach((item, i) => void visit(item, [...path, i]));
    if (isMap(target)) {
      for (const pair of target.items) {
        const key = keyText(pair);
        if (key === null) continue;
        const inside = [...path, key];
        if (isWhere(path)) mentions.push({ name: key, path: inside, at: "key", role: null, isNumeric: false });
        visit(pair.value, inside);
      }
    }
    const name = (target as { value?: unknown } | null)?.value;
    if (typeof name === "string" && name !== "") {
      const kind = kindOf(path);
      if (kind !== null) mentions.push({ name, path, at: "value", ...kind });
    }
  };
  visit(yaml.document.contents, []);
  return mentions;
}

/**
 * The columns other than time, event and variant, each once, in the order of first mention (DESIGN 4, rule 3). An incident
 * changes nothing of who is counted, so what only incidents name comes last.
 */
export function orderedColumns(mentions: readonly Mention[]): {
  columns: readonly string[];
  numericColumns: readonly string[];
} {
  const named = mentions.filter(({ role }) => role === null || role === "unit" || role === "event-id");
  const isOfIncident = ({ path }: Mention) => path[0] === "incidents";
  const ordered = [...named.filter((mention) => !isOfIncident(mention)), ...named.filter(isOfIncident)];
  const columns = [...new Set(ordered.map(({ name }) => name))];
  const numeric = new Set(named.filter(({ isNumeric }) => isNumeric).map(({ name }) => name));
  return { columns, numericColumns: columns.filter((name) => numeric.has(name)) };
}

function isWhere(at: Path): boolean {
  const path = asPlanned(at);
  const [section, , key, inner] = path;
  if (section === "filters" || section === "incidents") return path.length === 3 && key === "where";
  return section === "metrics" && path.length === 4 && (key === "of" || key === "per") && inner === "where";
}

const ROLES = ["unit", "time", "event", "variant", "event-id"] as const;
const NUMERIC = ["sum", "max", "min", "first", "last"];

function kindOf(at: Path): Pick<Mention, "role" | "isNumeric"> | null {
  const path = asPlanned(at);
  const [section, , key, inner] = path;
  if (section === "log" && path.length === 4 && key === "columns") {
    const role = ROLES.find((name) => name === inner);
    return role === undefined ? null : { role, isNumeric: false };
  }
  if (section === "metrics" && path.length === 4) {
    if ((key === "of" || key === "per") && NUMERIC.includes(String(inner))) return { role: null, isNumeric: true };
    if (key === "adjust-for" && inner === "column") return { role: null, isNumeric: true };
  }
  return section === "subgroups" && path.length === 2 ? { role: null, isNumeric: false } : null;
}
