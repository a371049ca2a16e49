import type { InputFile, Reduction } from "../../engine/types.ts";
import type { Plan } from "../../plan/types.ts";
import { count } from "../../words/index.ts";

/** What a report was made from: files, versions, the plan's words, and the plan itself. */
export interface FromWhat {
  readonly files: readonly FileText[];
  readonly lists: readonly FileText[];
  readonly facts: readonly { readonly name: string; readonly value: string }[];
  readonly planText: string;
}
export interface FileText {
  readonly name: string;
  readonly rows: string;
  readonly bytes: string;
  readonly fingerprint: string;
}

export function fromWhat(of: {
  readonly plan: Plan;
  readonly planText: string;
  readonly planSha256: string;
  readonly version: string;
  readonly reduction: Pick<Reduction, "inputs" | "lists" | "engine">;
  /** What else is to stand among the facts, after the plan's fingerprint. */
  readonly more?: readonly Fact[] | undefined;
}): FromWhat {
  const { inputs, lists } = of.reduction;
  return {
    files: inputs.map(fileText),
    lists: lists.map(fileText),
    facts: facts(of.plan, of.planSha256, of.version, of.reduction, of.more ?? []),
    planText: of.planText,
  };
}

function fileText({ name, rows, bytes, sha256 }: InputFile): FileText {
  return { name, rows: count(rows), bytes: count(bytes), fingerprint: sha256 };
}

type Fact = readonly [name: string, value: string | null];

function facts(
  plan: Plan,
  planSha256: string,
  version: string,
  { engine }: Pick<Reduction, "engine">,
  more: readonly Fact[],
) {
  const { owner, link, ended, notes, decided } = plan.texts;
  const decision =
    decided === null
      ? null
      : [decided.what, decided.by && `by ${decided.by}`, decided.on && `on ${decided.on}`, decided.because]
          .filter((part) => part !== null && part !== "")
          .join(", ");
  const known: readonly Fact[] = [
    ["Plan, SHA-256", planSha256],
    ...more,
    ["closeout", version],
    ["Engine", `${engine.name} ${engine.version}`],
    ["Days and times", plan.timezone],
    ["Owner", owner],
    ["Link", link],
    ["Why it ended", ended],
    ["Decided", decision],
    ["Notes", notes],
  ];
  return known.flatMap(([name, value]) => (value === null || value === "" ? [] : [{ name, value }]));
}
