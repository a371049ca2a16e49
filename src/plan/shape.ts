import { z } from "zod";
import { nearest } from "./nearest.ts";
import { parsePercent, parseYamlNumber } from "./number.ts";
import { planSchema } from "./schema.ts";
import {
  branchFor,
  branchIndex,
  dataAt,
  descriptionOf,
  expectedText,
  knownKeys,
  knownWords,
  schemaAt,
} from "./schema-walk.ts";
import type { Problem } from "./types.ts";
import { type Path, plainData, renameKey, sourceAt, type YamlText } from "./yaml.ts";

/** Keys and values that the schema does not take, as problems in words. */

type Issue = z.core.$ZodIssue;
type Schema = z.core.$ZodType;

/**
 * Reads a misspelt key as the known one that it most likely stands for, and says so. What stands under it is then checked
 * like everything else, and nothing is told twice (the misspelt key, and the right one as missing).
 */
export function correctKeys(yaml: YamlText): readonly Problem[] {
  const problems: Problem[] = [];
  for (;;) {
    const { value } = plainData(yaml);
    const renamed = unknownKeys(value).flatMap(({ path, key, near }): readonly Problem[] => {
      if (near === undefined || !renameKey(yaml, path, key, near)) return [];
      return [{ path: [...path, near], at: "key", message: "Unknown key.", nearest: near }];
    });
    if (renamed.length === 0) return problems;
    problems.push(...renamed);
  }
}

/** Everything in which the data differs from the schema, one problem a place. Misspelt keys are corrected before. */
export function shapeProblems(value: unknown, yaml: YamlText): readonly Problem[] {
  const strange = unknownKeys(value).map(({ path, key, known }): Problem => {
    const message = /^\d+%?$/.test(key)
      ? "A comma ends the value before it. Write numbers with a point, and without separators."
      : `Unknown key. Known here: ${known.join(", ")}.`;
    return { path: [...path, key], at: "key", message };
  });
  const told = new Set<string>();
  const wrong = issuesOf(value).flatMap((issue) => {
    const place = JSON.stringify(issue.path);
    if (issue.code === "unrecognized_keys" || told.has(place)) return [];
    told.add(place);
    return [wrongValue(issue, value, yaml)];
  });
  return [...strange, ...wrong];
}

function issuesOf(value: unknown): readonly Issue[] {
  return (planSchema.safeParse(value).error?.issues ?? []).flatMap((issue) => flattened(issue, [], value));
}

/** Of a union the faults of the branch that fits the kind of data, so that they lead to the place inside it. */
function flattened(issue: Issue, above: Path, value: unknown): readonly Issue[] {
  const path = [...above, ...issue.path];
  if (issue.code === "invalid_union") {
    const union = schemaAt(planSchema, path as Path, value);
    const index = union instanceof z.ZodUnion ? branchIndex(union, dataAt(value, path as Path)) : undefined;
    if (index !== undefined)
      return (issue.errors[index] ?? []).flatMap((inner) => flattened(inner, path as Path, value));
  }
  return [{ ...issue, path }];
}

interface UnknownKey {
  readonly path: Path;
  readonly key: string;
  readonly known: readonly string[];
  /** The nearest known key that the mapping does not yet have. */
  readonly near: string | undefined;
}

function unknownKeys(value: unknown): readonly UnknownKey[] {
  return issuesOf(value).flatMap((issue) => {
    if (issue.code !== "unrecognized_keys") return [];
    const path = issue.path as Path;
    const mapping = dataAt(value, path);
    const schema = schemaAt(planSchema, path, value);
    const known = schema === null ? [] : knownKeys(branchFor(schema, mapping));
    const free = known.filter((key) => !Object.hasOwn(mapping as object, key));
    return issue.keys.map((key) => ({ path, key, known, near: nearest(key, free) }));
  });
}

function wrongValue(issue: Issue, value: unknown, yaml: YamlText): Problem {
  const path = issue.path as Path;
  const schema = schemaAt(planSchema, path, value);
  const found = dataAt(value, path);
  const expected = `Expected ${expectedText(schema)}.`;

  if (found === undefined) {
    const meaning = knownWords(schema).length > 0 ? expected : (descriptionOf(schema) ?? expected);
    return { path: path.slice(0, -1), at: "key", message: `Missing key: ${String(path.at(-1))}. ${meaning}` };
  }
  if (issue.code === "custom" && issue.message !== NO_MESSAGE) return { path, at: "value", message: issue.message };
  if (issue.code === "invalid_key") return { path, at: "key", message: "A column needs a name." };
  if (found === null && path.includes("where")) {
    const message =
      "An empty cell is no value. For rows without one write {missing: true}, for the others {missing: false}.";
    return { path, at: "value", message };
  }
  const near = typeof found === "string" ? nearest(found, knownWords(schema)) : undefined;
  const remedy = near === undefined ? remedyFor(issue, schema, found, sourceAt(yaml, path)) : "";
  return { path, at: "value", message: expected + remedy, nearest: near };
}
const NO_MESSAGE = "Invalid input"; // zod's own, of a refinement that states none

/** What to write instead, where the value shows what was meant. */
function remedyFor(issue: Issue, schema: Schema | null, found: unknown, source: string): string {
  if (found === null) return " Nothing is written here: fill it in, or remove the key.";
  if (Array.isArray(found) && found.length === 0 && expectsList(schema))
    return " This list is empty: fill it, or remove the key.";
  if (issue.code === "too_small" && Array.isArray(found)) return ` There must be at least ${issue.minimum} of them.`;
  if (schema instanceof z.ZodArray && typeof found === "object") return " Put a dash before its first key.";
  if (typeof found === "number") return remedyForNumber(issue, schema, found, source);
  if (typeof found === "boolean" && isText(schema)) return ` Put it in quotes: "${source}".`;
  return typeof found === "string" ? remedyForText(schema, found) : "";
}

function remedyForText(schema: Schema | null, found: string): string {
  if (isText(schema)) return " This is empty.";
  if (schema instanceof z.ZodBoolean) {
    if (/^(true|false)$/.test(found)) return " Write it without quotes.";
    if (/^(yes|on)$/i.test(found)) return ` For ${found} write true.`;
    return /^(no|off)$/i.test(found) ? ` For ${found} write false.` : "";
  }
  if (!expectsNumber(schema)) return "";
  if (/^[+-]?\d{1,3}([ _,]\d{3})+(\.\d+)?$/.test(found))
    return ` Write ${found.replaceAll(/[ _,]/g, "")}, without separators.`;
  if (/^[+-]?\d+,\d+ ?%?$/.test(found)) return ` Write ${found.replace(",", ".")}, with a point.`;
  return parseYamlNumber(found) === null ? "" : " Write it without quotes.";
}

function remedyForNumber(issue: Issue, schema: Schema | null, found: number, source: string): string {
  if (isText(schema)) return ` Put it in quotes: "${source}".`;
  const share = parsePercent(`${source}%`);
  if (issue.code !== "too_big" || issue.maximum !== 1 || found <= 1 || found > 100 || share === null) return "";
  return issue.inclusive === true
    ? ` For ${source}% write ${share}, for ${parseYamlNumber(`${source}e2`)}% write ${parseYamlNumber(`${source}e2`)}%.`
    : ` For ${source}% write ${share}.`;
}

/** Text without a form of its own. */
function isText(schema: Schema | null): boolean {
  return schema instanceof z.ZodString && expectedText(schema) === "text";
}

function expectsList(schema: Schema | null): boolean {
  return schema instanceof z.ZodArray || (schema instanceof z.ZodUnion && schema.options.some(expectsList));
}

function expectsNumber(schema: Schema | null): boolean {
  return schema instanceof z.ZodNumber || (schema instanceof z.ZodUnion && schema.options.some(expectsNumber));
}
