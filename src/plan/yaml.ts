import {
  type Document,
  isAlias,
  isMap,
  isNode,
  isScalar,
  isSeq,
  type Pair,
  parseDocument,
  type Range,
  type Scalar,
} from "yaml";
import { parseYamlNumber } from "./number.ts";
import type { DecimalText, Problem } from "./types.ts";
import { endlessAlias, nestedTooDeep, undecoded, yamlProblems } from "./yaml-faults.ts";

/** The plan's text and its YAML tree: what is needed to say where something stands. */
export interface YamlText {
  readonly text: string;
  readonly document: Document.Parsed;
}
export type Path = readonly (string | number)[];
/** Start and end in the text, as offsets. */
export type Span = readonly [number, number];

/** Parses YAML 1.2 (core schema). What is not YAML comes back as problems; no structure is then to be trusted. */
export function readYaml(fileText: string): { yaml: YamlText; problems: readonly Problem[]; isBroken: boolean } {
  const text = fileText.replace(/^\uFEFF/, ""); // a byte order mark is no column of the first line
  const tooDeep = nestedTooDeep(text);
  const document = parseDocument(tooDeep === null ? text : "", {
    schema: "core",
    prettyErrors: false,
  });
  const endless = tooDeep ?? endlessAlias(document);
  return {
    yaml: { text, document },
    problems:
      endless === null
        ? [...undecoded(text), ...yamlProblems([...document.errors, ...document.warnings], text)]
        : [endless],
    isBroken: endless !== null || document.errors.some((fault) => fault.code !== "DUPLICATE_KEY"),
  };
}

/** The tree as plain data. Keys are the text they are written in (`0123:` is "0123"); of two equal keys the first counts. */
export function plainData(yaml: YamlText): { value: unknown; problems: readonly Problem[] } {
  const problems: Problem[] = [];
  const plain = (node: unknown, path: Path): unknown => {
    const target = resolved(yaml, node);
    if (isAlias(node) && target === undefined) {
      const message = "This alias names no anchor. Put text that begins with * in quotes.";
      problems.push({ path, at: "value", message });
    }
    if (isSeq(target)) return target.items.map((item, i) => plain(item, [...path, i]));
    if (isMap(target)) {
      const mapping: Record<string, unknown> = Object.create(null); // no inherited names: a column may be "constructor"
      for (const pair of target.items) {
        const key = keyText(pair);
        if (key === null || key === "__proto__") {
          const message = key === null ? "A key must be a text." : "No column or key can have this name.";
          problems.push({ path, at: "key", message, ...spanOfKey(pair) });
        } else if (!(key in mapping)) {
          mapping[key] = plain(pair.value, [...path, key]);
        }
      }
      return mapping;
    }
    if (!isScalar(target)) return null;
    if (typeof target.value === "number" && decimalText(target) === null) {
      const message = `Write a number in decimal digits. If this is text, put it in quotes: "${target.source ?? ""}".`;
      problems.push({ path, at: "value", message });
    }
    return target.value;
  };
  return { value: plain(yaml.document.contents, []), problems };
}

/** The pair (or list item) at a path, as the tree has it; null where the path leaves the tree. */
export function nodeAt(yaml: YamlText, path: Path): { key: Scalar | null; value: unknown } | null {
  let found: { key: Scalar | null; value: unknown } = { key: null, value: yaml.document.contents };
  for (const step of path) {
    const node = resolved(yaml, found.value);
    if (isSeq(node) && typeof step === "number" && step < node.items.length) {
      found = { key: null, value: node.items[step] };
    } else if (isMap(node)) {
      const pair = node.items.find((item) => keyText(item) === step);
      if (pair === undefined) return null;
      found = { key: isScalar(pair.key) ? pair.key : null, value: pair.value };
    } else {
      return null;
    }
  }
  return found;
}

/** Gives a key of the tree another name, where the mapping has none of that name; the text stays as it is. */
export function renameKey(yaml: YamlText, mapping: Path, from: string, to: string): boolean {
  const node = resolved(yaml, nodeAt(yaml, mapping)?.value);
  if (!isMap(node) || node.items.some((pair) => keyText(pair) === to)) return false;
  const pair = node.items.find((item) => keyText(item) === from);
  if (!isScalar(pair?.key)) return false;
  pair.key.value = to;
  return true;
}

/** A scalar as the text writes it, quotes aside. */
export function sourceAt(yaml: YamlText, path: Path): string {
  const node = resolved(yaml, nodeAt(yaml, path)?.value);
  return isScalar(node) ? (node.source ?? "") : "";
}

/** The path of the innermost key or item that holds an offset of the text. */
export function pathAt(yaml: YamlText, offset: number): Path {
  let node: unknown = yaml.document.contents;
  const path: (string | number)[] = [];
  for (;;) {
    const inside: readonly { step: string | number | null; from: unknown; node: unknown }[] = isMap(node)
      ? node.items.map((pair) => ({ step: keyText(pair), from: pair.key, node: pair.value }))
      : isSeq(node)
        ? node.items.map((item, i) => ({ step: i, from: item, node: item }))
        : [];
    const last = inside.findLast(({ from }) => (rangeOf(from)?.[0] ?? offset + 1) <= offset);
    if (last === undefined || last.step === null || (rangeOf(last.node)?.[2] ?? offset) <= offset) return path;
    path.push(last.step);
    node = last.node;
  }
}

/** The digits of the number at a path, exactly as the text has them, in canonical form; null if there is no number. */
export function decimalAt(yaml: YamlText, path: Path): DecimalText | null {
  const node = resolved(yaml, nodeAt(yaml, path)?.value);
  return isScalar(node) && typeof node.value === "number" ? decimalText(node) : null;
}

/** What an alias stands for; every other node is itself. */
export function resolved(yaml: YamlText, node: unknown): unknown {
  return isAlias(node) ? node.resolve(yaml.document) : node;
}

export function keyText(pair: Pair): string | null {
  if (!isScalar(pair.key) || pair.key.value === null) return null;
  return typeof pair.key.value === "string" ? pair.key.value : (pair.key.source ?? String(pair.key.value));
}

/** Null for what YAML takes for a number and nobody else does (0x1F, .inf), and for more digits than are written out. */
function decimalText(node: Scalar): DecimalText | null {
  const decimal = parseYamlNumber(node.source ?? "");
  return decimal?.includes("e") ? null : decimal;
}

function rangeOf(node: unknown): Range | null {
  return isNode(node) ? (node.range ?? null) : null;
}

function spanOfKey(pair: Pair): { span?: Span } {
  const range = (pair.key as Scalar | null)?.range;
  return range ? { span: [range[0], Math.max(range[1], range[0] + 1)] } : {};
}
