import type { Path } from "../yaml.ts";

/**
 * The plan's data as the rules read it: a rule looks at keys that stand together, and must say what is wrong also when
 * other parts of the plan are broken, so nothing is taken to be of the right type.
 */
export type Loose = Readonly<Record<string, unknown>>;

export interface Item {
  readonly path: Path;
  readonly data: Loose;
}

export function mapping(value: unknown): Loose | null {
  return typeof value === "object" && value !== null && !Array.isArray(value) ? (value as Loose) : null;
}

/** The mappings of a list of the plan, with their paths; what is no mapping is left to the schema. */
export function items(plan: Loose, section: string): readonly Item[] {
  const list = plan[section];
  if (!Array.isArray(list)) return [];
  return list.flatMap((value: unknown, i) => {
    const data = mapping(value);
    return data === null ? [] : [{ path: [section, i], data }];
  });
}

/** The metrics that were asked afterwards. */
export function afterwards(plan: Loose): readonly Item[] {
  const asked = mapping(plan["asked-afterwards"]);
  return asked === null
    ? []
    : items(asked, "metrics").map(({ path, data }) => ({ path: ["asked-afterwards", ...path], data }));
}

/** All metrics, planned and asked afterwards. */
export const allMetrics = (plan: Loose): readonly Item[] => [...items(plan, "metrics"), ...afterwards(plan)];

/** `of` and `per` of every metric. */
export function parts(plan: Loose): readonly Item[] {
  return allMetrics(plan).flatMap(({ path, data }) =>
    ["of", "per"].flatMap((key) => {
      const part = mapping(data[key]);
      return part === null ? [] : [{ path: [...path, key], data: part }];
    }),
  );
}
