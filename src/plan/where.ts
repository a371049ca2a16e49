import type { WhereYaml } from "./schema.ts";
import type { ColumnTest, Scalar, Where } from "./types.ts";
import { decimalAt, type Path, type YamlText } from "./yaml.ts";

type Condition = WhereYaml[string];
type Values = string | number | boolean | readonly (string | number | boolean)[];

/** A `where` of the plan as a list of tests that must all hold; their order means nothing. */
export function whereTests(where: WhereYaml | undefined, path: Path, yaml: YamlText): Where {
  return Object.entries(where ?? {}).flatMap(([column, condition]) =>
    columnTests(column, condition, [...path, column], yaml),
  );
}

function columnTests(column: string, condition: Condition, path: Path, yaml: YamlText): readonly ColumnTest[] {
  if (typeof condition !== "object" || Array.isArray(condition)) {
    return [{ column, kind: "in", values: scalars(condition, path, yaml) }];
  }
  return Object.keys(condition).map((operator): ColumnTest => {
    const inside = [...path, operator];
    switch (operator) {
      case "not":
      case "in":
        return { column, kind: operator, values: scalars(given(condition[operator]), inside, yaml) };
      case "above":
      case "below":
      case "at-least":
      case "at-most":
        return { column, kind: operator, value: given(decimalAt(yaml, inside)) };
      case "missing":
        return { column, kind: "missing", value: given(condition.missing) };
      case "matches":
        return { column, kind: "matches", patterns: [given(condition.matches)].flat() };
      default:
        throw new Error(`no test of a column is called ${operator}`);
    }
  });
}

function scalars(values: Values, path: Path, yaml: YamlText): readonly Scalar[] {
  if (typeof values !== "object") return [scalar(values, path, yaml)];
  return values.map((value, i) => scalar(value, [...path, i], yaml));
}

function scalar(value: string | number | boolean, path: Path, yaml: YamlText): Scalar {
  if (typeof value === "string") return { kind: "text", text: value };
  if (typeof value === "boolean") return { kind: "boolean", value };
  return { kind: "number", value: given(decimalAt(yaml, path)) };
}

function given<T>(value: T | undefined | null): T {
  if (value === undefined || value === null) throw new Error("a key of the plan without a value passed the schema");
  return value;
}
