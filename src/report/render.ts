import { readFileSync } from "node:fs";
import Handlebars from "handlebars";
import type { Drawing } from "./charts/draw.ts";
import type { Page } from "./page.ts";
import { typeset } from "./typeset.ts";

/** templates/ lies beside src/ and beside dist/, so one address serves both. */
const FOLDER = new URL("../../templates/", import.meta.url);
const PARTIALS = [
  "decision",
  "forest",
  "choices",
  "turning",
  "contents",
  "checks",
  "counted",
  "metrics",
  "distribution",
  "flow",
  "term",
  "baseline",
  "consort",
  "design",
  "sampling",
  "power",
  "methods",
] as const;

/** The page as HTML. Everything is escaped by Handlebars; the one door for other text is `ownDrawingUnescaped`. */
export function renderPage(page: Page): string {
  const handlebars = Handlebars.create();
  handlebars.registerHelper("ownDrawingUnescaped", ownDrawingUnescaped);
  handlebars.registerHelper("cssText", cssText);
  for (const name of PARTIALS) handlebars.registerPartial(name, template(`partials/${name}.hbs`));
  handlebars.registerPartial("style", template("style.css"));
  const render = handlebars.compile<Page>(template("report.hbs"), {
    strict: true,
    knownHelpersOnly: true,
    knownHelpers: { ownDrawingUnescaped: true, cssText: true, lookup: true },
    preventIndent: true,
  });
  return render(typeset(page));
}

/** For drawings of charts/draw.ts only: they hold no text from a plan or a log except what that file escapes. */
function ownDrawingUnescaped(drawing: Drawing): Handlebars.SafeString {
  return new Handlebars.SafeString(drawing.svg);
}

const MOST_TITLE = 80;

/**
 * A name from the plan inside a string of the style sheet, for the head of each printed page: every sign but Latin letters,
 * digits and spaces stands as its number, so that none can end the string, the rule or the sheet.
 */
export function cssText(text: string): string {
  const letters = [...text.replace(/\s+/g, " ")];
  const shown = letters.length <= MOST_TITLE ? letters : [...letters.slice(0, MOST_TITLE - 1), "\u2026"];
  return shown
    .map((letter) => (/[A-Za-z0-9 ]/.test(letter) ? letter : `\\${(letter.codePointAt(0) ?? 0xfffd).toString(16)} `))
    .join("");
}

function template(name: string): string {
  return readFileSync(new URL(name, FOLDER), "utf8");
}
