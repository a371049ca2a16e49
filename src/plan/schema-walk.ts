import { z } from "zod";
import { list } from "../words/index.ts";
import type { Path } from "./yaml.ts";

/** What the schema asks for at a place of the plan, so that keys, types and words need stating only once. */

type Schema = z.core.$ZodType;

/** The schema at a path; null beyond what the schema knows. A union stays a union: see `branchFor`. */
export function schemaAt(schema: Schema, path: Path, data: unknown): Schema | null {
  const [step, ...rest] = path;
  const here = bare(schema);
  if (step === undefined) return here;
  const inside = dataAt(data, [step]);
  const branch = branchFor(here, data);
  if (branch instanceof z.ZodObject) {
    const property = branch.shape[step];
    return property === undefined ? null : schemaAt(property, rest, inside);
  }
  if (branch instanceof z.ZodArray) return schemaAt(branch.element, rest, inside);
  if (branch instanceof z.ZodRecord) return schemaAt(branch.valueType, rest, inside);
  return null;
}

/** Of a union the option for a list, or for a mapping, where the data is one; else the schema itself. */
export function branchFor(schema: Schema, data: unknown): Schema {
  const index = schema instanceof z.ZodUnion ? branchIndex(schema, data) : undefined;
  return schema instanceof z.ZodUnion && index !== undefined ? bare(schema.options[index] ?? schema) : schema;
}

export function branchIndex(union: z.ZodUnion, data: unknown): number | undefined {
  if (typeof data !== "object" || data === null) return undefined;
  const index = union.options.findIndex((option) => {
    const branch = bare(option);
    return Array.isArray(data) ? branch instanceof z.ZodArray : branch instanceof z.ZodObject;
  });
  return index === -1 ? undefined : index;
}

export function dataAt(data: unknown, path: Path): unknown {
  return path.reduce<unknown>(
    (inside, step) => (inside as Readonly<Record<string, unknown>> | null | undefined)?.[step],
    data,
  );
}

export function knownKeys(schema: Schema | null): readonly string[] {
  return schema instanceof z.ZodObject ? Object.keys(schema.shape) : [];
}

/** The words that may stand there, where only certain ones may. */
export function knownWords(schema: Schema | null): readonly string[] {
  if (schema instanceof z.ZodEnum) return schema.options.map(String);
  if (schema instanceof z.ZodLiteral) return [...schema.values].map(String);
  return schema instanceof z.ZodBoolean ? ["true", "false"] : [];
}

/** "text", "mean, proportion or quantile", "a mapping with the keys one and many". */
export function expectedText(schema: Schema | null): string {
  if (schema === null) return "another value";
  const stated = z.globalRegistry.get(schema)?.expected;
  if (typeof stated === "string") return stated;
  const words = knownWords(schema);
  if (words.length > 0) return list(words, "or");
  if (schema instanceof z.ZodObject) return `a mapping with ${keysText(knownKeys(schema))}`;
  if (schema instanceof z.ZodRecord) return "a mapping of columns and what they must hold";
  if (schema instanceof z.ZodArray) return "a list, each item with a dash";
  return schema instanceof z.ZodNumber ? "a number" : "text";
}

export function descriptionOf(schema: Schema | null): string | undefined {
  return schema === null ? undefined : z.globalRegistry.get(schema)?.description;
}

function keysText(keys: readonly string[]): string {
  return `the ${keys.length === 1 ? "key" : "keys"} ${list(keys)}`;
}

/** Without the wrappers that make a key optional. */
function bare(schema: Schema): Schema {
  return schema instanceof z.ZodOptional || schema instanceof z.ZodDefault || schema instanceof z.ZodPrefault
    ? bare(schema.unwrap())
    : schema;
}
