import { isPlain, mergedNames, type Named, namedLists, type PlanChange, TEXTS } from "./changes.ts";
import { plainData, readYaml } from "./yaml.ts";

/** Changes that belong together: of one item of a list, of one key of the plan. */
export interface PlanStep {
  /** "filters, staff accounts: added", "metrics, Booked: cap", "decision: confidence". */
  readonly label: string;
  readonly ids: readonly string[];
}

/** More are taken together as the last one: each costs two passes over the log. */
const MOST_STEPS = 8;

/** The changes on which figures depend, as steps from one plan to the other, in their order. */
export function planSteps(changes: readonly PlanChange[]): readonly PlanStep[] {
  const groups = new Map<string, PlanChange[]>();
  for (const change of changes.filter(({ counts }) => counts)) {
    groups.set(idOf(change), [...(groups.get(idOf(change)) ?? []), change]);
  }
  const steps = [...groups].map(([id, own]) => ({ label: labelOf(own), ids: [id] }));
  if (steps.length <= MOST_STEPS) return steps;
  const [first, rest] = [steps.slice(0, MOST_STEPS - 1), steps.slice(MOST_STEPS - 1)];
  return [...first, { label: `${rest.length} others together`, ids: rest.flatMap(({ ids }) => ids) }];
}

function idOf({ section, item, kind }: Pick<PlanChange, "section" | "item" | "kind">): string {
  return JSON.stringify(kind === "moved" ? [section, null, "order"] : [section, item]);
}

function labelOf([first, ...others]: readonly PlanChange[]): string {
  if (first === undefined) throw new Error("a step without a change");
  const whole = first.item !== null && first.place === `${first.section}, ${first.item}`;
  if (whole || !first.place.includes(":"))
    return first.kind === "changed" ? first.place : `${first.place}: ${first.kind}`;
  return [first.place, ...others.map(({ place }) => place.slice(place.lastIndexOf(": ") + 2))].join(", ");
}

/**
 * The earlier plan with some of the steps to the later one taken, as the text of a plan. What no figure depends on is the
 * later plan's. All steps give the later plan, but for the digits of numbers that a double does not hold.
 */
export function combinedPlan(
  before: string,
  after: string,
  steps: readonly PlanStep[],
  taken: readonly PlanStep[],
): string {
  const [was, is] = [dataOf(before), dataOf(after)];
  const known = new Set(steps.flatMap(({ ids }) => ids));
  const chosen = new Set(taken.flatMap(({ ids }) => ids));
  /** Whether the later plan's part stands there. */
  const isTaken = (section: string, item: string | null, kind: PlanChange["kind"] = "changed") => {
    const id = idOf({ section, item, kind });
    return chosen.has(id) || !known.has(id);
  };
  const sections = [...Object.keys(is), ...Object.keys(was).filter((key) => !(key in is))];
  const entries = sections.map((section) => {
    const [a, b] = [was[section], is[section]];
    if (TEXTS.includes(section)) return [section, b];
    const lists = namedLists(section, a, b);
    if (lists !== null) {
      return [section, items(lists[0], lists[1], isTaken(section, null, "moved"), (name) => isTaken(section, name))];
    }
    return [section, isTaken(section, null) ? b : a];
  });
  return JSON.stringify(Object.fromEntries(entries));
}

function items(
  was: readonly Named[],
  is: readonly Named[],
  inNewOrder: boolean,
  isTaken: (name: string) => boolean,
): readonly Named[] {
  const [old, now] = [was.map(({ name }) => name), is.map(({ name }) => name)];
  return (inNewOrder ? mergedNames(now, old) : mergedNames(old, now)).flatMap((name) => {
    const found = (isTaken(name) ? is : was).find((item) => item.name === name);
    return found === undefined ? [] : [found];
  });
}

function dataOf(text: string): Readonly<Record<string, unknown>> {
  const { value } = plainData(readYaml(text).yaml);
  return isPlain(value) ? value : {};
}
