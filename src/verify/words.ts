import { capital, plural } from "../words/index.ts";
import type { Difference } from "./differences.ts";

const MOST_TOLD = 12;

/** The differences for a reader, those of the log's files first, since the others may follow from them. */
export function differenceLines(found: readonly Difference[]): string[] {
  const ordered = [...found.filter(({ kind }) => kind === "file"), ...found.filter(({ kind }) => kind !== "file")];
  const lines = ordered.slice(0, MOST_TOLD).map((one) => `- ${differenceText(one)}`);
  const more = ordered.length - lines.length;
  return more > 0 ? [...lines, `- and ${plural(more, "more place", "more places")}`] : lines;
}

function differenceText({ kind, where, given, made }: Difference): string {
  const place = capital(where);
  switch (kind) {
    case "file":
      return fileText(place, given, made);
    case "drawing":
      return `${place}: a drawing is not the one that the log gives.`;
    case "markup":
      return `${place}: the page itself was changed. In the report: ${shown(given)}. Recomputed: ${shown(made)}.`;
    case "number":
      return `${place}: a number differs. In the report: ${shown(given)}. Recomputed: ${shown(made)}.`;
    case "words":
      return given === ""
        ? `${place}: missing in the report: ${shown(made)}.`
        : made === ""
          ? `${place}: not recomputed, so added to the report: ${shown(given)}.`
          : `${place}: words differ. In the report: ${shown(given)}. Recomputed: ${shown(made)}.`;
  }
}

/** A row of the table of files: name, rows, bytes, fingerprint. */
function fileText(place: string, given: string, made: string): string {
  const nameOf = (text: string) => text.replace(/ [\d,]+ [\d,]+ [0-9a-f]{64}$/, "");
  const print = (text: string) => /[0-9a-f]{64}$/.exec(text)?.[0] ?? "";
  if (made === "") return `${place}: the log has no file ${nameOf(given)} any more.`;
  if (given === "") return `${place}: the log has a file ${nameOf(made)} that the report does not know.`;
  if (nameOf(given) !== nameOf(made))
    return `${place}: the report names the file ${nameOf(given)}, the log has ${nameOf(made)}.`;
  if (print(given) === print(made))
    return `${place}: ${nameOf(given)}: a number differs. In the report: ${shown(given)}. Recomputed: ${shown(made)}.`;
  return `${place}: the file ${nameOf(given)} is not the one that the report names: its fingerprint is ${print(made)}, in the report ${print(given)}.`;
}

const LONGEST = 240;

function shown(text: string): string {
  if (text === "") return "nothing";
  return `\u201c${text.length > LONGEST ? `${text.slice(0, LONGEST)} \u2026` : text}\u201d`;
}
