import type { ChoiceCells, MetricCells } from "../../src/engine/types.ts";
import type { Value } from "./choiceSums.ts";
import { wrongCells, wrongLogs, wrongPairs } from "./choiceSums.ts";

/** What the units of one metric hold under the plan's own choice and under each other; null where there is no such choice. */
export interface Expected {
  readonly own: readonly Value[];
  readonly others: ReadonlyMap<Exclude<ChoiceCells["choice"], "log">, readonly Value[] | null>;
  readonly isPaired: boolean;
  /** Whether log(1 + x) is to be there. */
  readonly isLogged: boolean;
  /** Caps that values are held down to. */
  readonly held: readonly bigint[];
}

/**
 * Where the choices of a metric's cells depart from what is expected: those that are there hold the sums of their units, and
 * those that are not would change nothing, or leave nothing.
 */
export function wrongChoices(cells: MetricCells, expected: Expected): string[] {
  const wrong = cells.choices.flatMap((found) => wrongChoice(found, expected));
  const missing = [...expected.others].flatMap(([choice, values]) =>
    cells.choices.some((found) => found.choice === choice) || isLeftOut(choice, values, cells, expected)
      ? []
      : [`${choice} is not there`],
  );
  const log = cells.choices.some(({ choice }) => choice === "log");
  return [...wrong, ...missing, ...(log === expected.isLogged ? [] : [`log is ${log ? "" : "not "}there`])];
}

function wrongChoice(found: ChoiceCells, expected: Expected): string[] {
  const named = (lines: readonly string[]) => lines.map((line) => `${found.choice}: ${line}`);
  if (found.choice === "log") return named(wrongLogs(found.logged, expected.own));
  const values = expected.others.get(found.choice);
  if (values == null) return [`${found.choice} is there, though there is no such choice`];
  if (same(values, expected.own)) return [`${found.choice} is there, though it changes nothing`];
  return named([
    ...wrongCells(found.of, values, expected.held),
    ...(found.joint === null
      ? expected.isPaired
        ? ["no pairs"]
        : []
      : wrongPairs(found.joint, values, expected.held)),
  ]);
}

/** No such choice, no change, the same as no cap at all, a cap that leaves nothing above 0, or an arm without units. */
function isLeftOut(
  choice: string,
  values: readonly Value[] | null,
  cells: MetricCells,
  { own, others }: Expected,
): boolean {
  if (values === null || same(values, own)) return true;
  if (choice.startsWith("cap-")) {
    const uncapped = others.get("no-cap");
    return (uncapped != null && same(values, uncapped)) || values.every(({ y }) => y <= 0n);
  }
  const arms = new Set(cells.of.variant);
  return choice !== "no-cap" && [...arms].some((arm) => values.every(({ variant }) => variant !== arm));
}

function same(a: readonly Value[], b: readonly Value[]): boolean {
  const text = (values: readonly Value[]) =>
    values
      .map(({ variant, y, x }) => `${variant} ${y} ${x}`)
      .sort()
      .join();
  return text(a) === text(b);
}
