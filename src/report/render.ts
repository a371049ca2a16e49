import { readFileSync } from "node:fs";
import Handlebars from "handlebars";
import type { Drawing } from "./charts/draw.ts";
import type { BlindPage } from "./check/page.ts";
import type { Comparison } from "./comparison.ts";
import type { Page } from "./page.ts";
import { pageOne } from "./page-one.ts";
import { termParts } from "./terms.ts";
import { typeset, typesetPlainly, typesetWithPlan } from "./typeset.ts";

/** templates/ lies beside src/ and beside dist/, so one address serves both. */
const FOLDER = new URL("../../templates/", import.meta.url);
const PARTIALS = [
  "head",
  "decision",
  "rerun",
  "changes",
  "forest",
  "choices",
  "turning",
  "contents",
  "checks",
  "counted",
  "incidents",
  "metrics",
  "distribution",
  "flow",
  "term",
  "told",
  "baseline",
  "baseline-row",
  "consort",
  "design",
  "sampling",
  "accrual",
  "subgroups",
  "afterwards",
  "power",
  "methods",
  "from-what",
  "rule",
  "schedule",
  "withheld",
] as const;

/** The page as HTML. Everything is escaped by Handlebars; the one door for other text is `ownDrawingUnescaped`. */
export function renderPage(page: Page): string {
  return rendered("report.hbs", typeset(page));
}

/** The same of two reports that are compared. */
export function renderComparison(page: Comparison): string {
  return rendered("compare.hbs", typesetPlainly(page));
}

/** A check before the end. */
export function renderBlind(page: BlindPage): string {
  return rendered("check.hbs", typesetWithPlan(page));
}

/** Page one alone, on one sheet: `fingerprint` tells whose it is. */
export function renderPageOne(page: Page, fingerprint: string): string {
  return rendered("page-one.hbs", { ...typeset(pageOne(page)), fingerprint });
}

function rendered(name: string, data: object): string {
  const handlebars = Handlebars.create();
  handlebars.registerHelper("ownDrawingUnescaped", ownDrawingUnescaped);
  handlebars.registerHelper("cssText", cssText);
  handlebars.registerHelper("termParts", termParts);
  for (const partial of PARTIALS) handlebars.registerPartial(partial, template(`partials/${partial}.hbs`));
  handlebars.registerPartial("style", template("style.css"));
  const render = handlebars.compile<object>(template(name), {
    strict: true,
    knownHelpersOnly: true,
    knownHelpers: { ownDrawingUnescaped: true, cssText: true, termParts: true, lookup: true },
    preventIndent: true,
  });
  return render(data);
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
