import { isAlias, isMap, isScalar, isSeq } from "yaml";
import { loadPlan } from "./load.ts";
import { canonical, SEALED_PARTS, type SealedPart, sealOf } from "./seal.ts";
import type { Plan } from "./types.ts";
import { keyText, nodeAt, type Path, plainData, readYaml, resolved, type YamlText } from "./yaml.ts";

/** One key of the plan that is not as it was, in the plan's own words. */
export interface PlanChange {
  /** "filters, staff accounts" or "metrics, Booked: worthwhile". */
  readonly place: string;
  /** What is changed as one: a top-level key, of a list of named items the item as well. */
  readonly section: string;
  readonly item: string | null;
  readonly kind: "added" | "removed" | "changed" | "moved";
  /** As the plan writes it, on one line; null where there is none. */
  readonly before: string | null;
  readonly after: string | null;
  /** It belongs to the rule: what decides, who is enrolled, for how long (see `sealOf`). */
  readonly decides: boolean;
  /** False for a text that no figure depends on. */
  readonly counts: boolean;
}

const NAMED = ["variants", "metrics", "filters", "incidents"];
export const TEXTS: readonly string[] = [
  "experiment",
  "question",
  "unit-called",
  "ended",
  "owner",
  "link",
  "limits",
  "notes",
  "decided",
  "registered",
  "planned",
  "forecast",
  "incidents",
];
const TEXTS_OF_ITEM: Readonly<Record<string, readonly string[]>> = {
  variants: ["what"],
  metrics: ["in", "expected"],
  filters: ["why"],
};
const PART_OF: Readonly<Record<string, SealedPart>> = {
  metrics: "metrics",
  variants: "allocation",
  enrolment: "enrolment",
  timezone: "enrolment",
  "follow-up": "follow-up",
  decision: "decision",
  looks: "looks",
};

type Found = Omit<PlanChange, "decides" | "counts"> & { readonly key: string | null };

/**
 * What the second plan says otherwise than the first, key by key in the order of the second; spaces, comments and the
 * order of keys aside. Both are texts of plans; of one that is no plan any more only the keys are compared.
 */
export function planChanges(before: string, after: string): readonly PlanChange[] {
  const [a, b] = [readYaml(before).yaml, readYaml(after).yaml];
  const [dataA, dataB] = [mapping(plainData(a).value), mapping(plainData(b).value)];
  const found = union(Object.keys(dataB), Object.keys(dataA)).flatMap((section) => {
    const lists = namedLists(section, dataA[section], dataB[section]);
    return lists === null
      ? sectionChanges(a, b, section, dataA[section], dataB[section])
      : namedItems(a, b, section, lists[0], lists[1]);
  });
  const parts = changedParts(before, after);
  return found.map(({ key, ...change }) => {
    const text = TEXTS.includes(change.section) || TEXTS_OF_ITEM[change.section]?.includes(key ?? "") === true;
    const part = PART_OF[change.section];
    const isInformation = change.section === "metrics" && !decidesIn(change.item, [before, after]);
    return { ...change, counts: !text, decides: !text && !isInformation && part !== undefined && parts.has(part) };
  });
}

function sectionChanges(a: YamlText, b: YamlText, section: string, was: unknown, is: unknown): Found[] {
  const of = { section, item: null };
  if (isPlain(was) && isPlain(is)) {
    return union(Object.keys(is), Object.keys(was)).flatMap((key) =>
      entry(a, b, [section, key], was[key], is[key], { ...of, key, place: `${section}: ${key}` }),
    );
  }
  return entry(a, b, [section], was, is, { ...of, key: null, place: section });
}

/** Items with the same name are one item, wherever they stand; a new order is a change of its own. */
function namedItems(a: YamlText, b: YamlText, section: string, was: readonly Named[], is: readonly Named[]): Found[] {
  const names = mergedNames(
    is.map(({ name }) => name),
    was.map(({ name }) => name),
  );
  const items = names.flatMap((name): Found[] => {
    const [i, j] = [was.findIndex((one) => one.name === name), is.findIndex((one) => one.name === name)];
    const of = { section, item: name, place: `${section}, ${name}` };
    const [from, to] = [was[i], is[j]];
    if (from === undefined || to === undefined) {
      const found = entry(a, b, [section], from, to, { ...of, key: null });
      return found.map((one) => ({
        ...one,
        before: from === undefined ? null : written(a, [section, i], ["name"]),
        after: to === undefined ? null : written(b, [section, j], ["name"]),
      }));
    }
    return union(Object.keys(to), Object.keys(from)).flatMap((key) =>
      entry(a, b, null, from[key], to[key], { ...of, key, place: `${of.place}: ${key}` }).map((one) => ({
        ...one,
        before: from[key] === undefined ? null : written(a, [section, i, key]),
        after: to[key] === undefined ? null : written(b, [section, j, key]),
      })),
    );
  });
  return [...items, ...moved(section, was, is)];
}

function moved(section: string, was: readonly Named[], is: readonly Named[]): Found[] {
  const common = (of: readonly Named[], other: readonly Named[]) =>
    of.map(({ name }) => name).filter((name) => other.some((one) => one.name === name));
  const [before, after] = [common(was, is).join(", "), common(is, was).join(", ")];
  if (before === after) return [];
  return [{ place: `${section}: their order`, section, item: null, key: null, kind: "moved", before, after }];
}

function entry(
  a: YamlText,
  b: YamlText,
  path: Path | null,
  was: unknown,
  is: unknown,
  of: Pick<Found, "place" | "section" | "item" | "key">,
): Found[] {
  if (sameData(was, is)) return [];
  const kind = was === undefined ? "added" : is === undefined ? "removed" : "changed";
  return [
    {
      ...of,
      kind,
      before: path === null || was === undefined ? null : written(a, path),
      after: path === null || is === undefined ? null : written(b, path),
    },
  ];
}

/** What stands at a path, on one line: scalars as the text writes them, lists and mappings between brackets. */
function written(yaml: YamlText, path: Path, without: readonly string[] = []): string {
  return flow(yaml, nodeAt(yaml, path)?.value, without);
}

function flow(yaml: YamlText, node: unknown, without: readonly string[] = []): string {
  const target = resolved(yaml, node);
  if (isSeq(target)) return `[${target.items.map((item) => flow(yaml, item)).join(", ")}]`;
  if (isMap(target)) {
    const pairs = target.items.filter((pair) => !without.includes(keyText(pair) ?? ""));
    return `{${pairs.map((pair) => `${keyText(pair) ?? ""}: ${flow(yaml, pair.value)}`).join(", ")}}`;
  }
  if (!isScalar(target) || isAlias(target)) return "";
  const text = typeof target.value === "string" ? target.value : (target.source ?? String(target.value));
  return text.replace(/\s+/g, " ").trim();
}

function changedParts(before: string, after: string): ReadonlySet<SealedPart> {
  const [a, b] = [planIn(before), planIn(after)];
  if (a === null || b === null) return new Set(SEALED_PARTS);
  const [was, is] = [sealOf(a).parts, sealOf(b).parts];
  return new Set(SEALED_PARTS.filter((part) => was[part] !== is[part]));
}

function decidesIn(metric: string | null, texts: readonly string[]): boolean {
  const roles = texts.flatMap((text) => planIn(text)?.metrics.filter(({ name }) => name === metric) ?? []);
  return metric === null || roles.length === 0 || roles.some(({ role }) => role !== "secondary");
}

/** The plan of a text; null where it is none (any more). */
export function planIn(text: string): Plan | null {
  const loaded = loadPlan(text);
  return "plan" in loaded ? loaded.plan : null;
}

/** Names in the first order; what only the second has comes behind its neighbour there. */
export function mergedNames(first: readonly string[], second: readonly string[]): readonly string[] {
  const merged = [...first];
  second.forEach((name, i) => {
    if (merged.includes(name)) return;
    const neighbour = second[i - 1];
    merged.splice(neighbour === undefined ? 0 : merged.indexOf(neighbour) + 1, 0, name);
  });
  return merged;
}

export interface Named {
  readonly name: string;
  readonly [key: string]: unknown;
}

function isNamed(value: unknown): value is readonly Named[] {
  return Array.isArray(value) && value.every((item) => isPlain(item) && typeof item.name === "string");
}

/** Both as lists of named items, one that is not there as an empty one; null where they are anything else. */
export function namedLists(
  section: string,
  was: unknown,
  is: unknown,
): readonly [readonly Named[], readonly Named[]] | null {
  if (!NAMED.includes(section)) return null;
  const [a, b] = [was ?? [], is ?? []];
  return isNamed(a) && isNamed(b) ? [a, b] : null;
}

export function isPlain(value: unknown): value is Readonly<Record<string, unknown>> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

export function sameData(a: unknown, b: unknown): boolean {
  if (a === undefined || b === undefined) return a === b;
  return canonical(a) === canonical(b);
}

function mapping(value: unknown): Readonly<Record<string, unknown>> {
  return isPlain(value) ? value : {};
}

function union(first: readonly string[], second: readonly string[]): readonly string[] {
  return [...first, ...second.filter((key) => !first.includes(key))];
}
