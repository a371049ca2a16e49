import { planText, type Sections } from "../plans.ts";

/** A wrong plan: the sections that differ from the small right one, the places marked «so», and what is said there. */
export interface WrongPlan {
  readonly title: string;
  readonly plan: Sections | string;
  /** One a marked place, in the order of the text: the trail, then the lines said (several problems of one place too). */
  readonly says: readonly (readonly [trail: string, ...lines: string[]])[];
}

/** The text without its marks, and the whole message that it must give, with places counted from the marks. */
export function expectation({ plan, says }: WrongPlan): { text: string; message: string } {
  const marked = typeof plan === "string" ? plan : planText(plan);
  const places = [...marked.matchAll(/«([^»]*)»/g)].map((match, i) => {
    const before = marked.slice(0, match.index).replaceAll(/[«»]/g, "");
    const line = before.split("\n").length;
    const column = before.length - before.lastIndexOf("\n");
    const source = marked.replaceAll(/[«»]/g, "").split("\n")[line - 1] ?? "";
    const indent = source.length - source.trimStart().length;
    const [trail = "", ...lines] = says[i] ?? [];
    const carets = " ".repeat(column - 1 - indent) + "^".repeat((match[1] ?? "").length);
    return { at: `${line}:${column}`, trail, lines: [source.trim(), carets, ...lines] };
  });
  if (places.length !== says.length)
    throw new Error(`${places.length} places are marked, ${says.length} are spoken of`);
  const width = Math.max(...places.map(({ at }) => at.length));
  const mistakes = says.reduce((sum, [, ...lines]) => sum + lines.length, 0);
  const blocks = places.map(({ at, trail, lines }) =>
    [`plan.yaml:${at.padEnd(width)}  ${trail}`.trimEnd(), ...lines.map((line) => `    ${line}`)].join("\n"),
  );
  const count = mistakes === 1 ? "1 mistake" : `${mistakes} mistakes`;
  const heading = `plan.yaml has ${count}. Nothing was computed and no file was written.`;
  return { text: marked.replaceAll(/[«»]/g, ""), message: [heading, ...blocks].join("\n\n") };
}
