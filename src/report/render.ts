import { readFileSync } from "node:fs";
import Handlebars from "handlebars";
import type { Drawing } from "./charts/draw.ts";
import type { Comparison } from "./comparison.ts";
import type { Page } from "./page.ts";
import { everyText, typeset } from "./typeset.ts";

/** templates/ lies beside src/ and beside dist/, so one address serves both. */
const FOLDER = new URL("../../templates/", import.meta.url);
const PARTIALS = [
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
  "sampling",
  "accrual",
  "subgroups",
  "power",
  "methods",
] as const;

/** The page as HTML. Everything is escaped by Handlebars; the one door for other text is `ownDrawingUnescaped`. */
export function renderPage(page: Page): string {
  return rendered("report.hbs", typeset(page));
}

/** The same of two reports that are compared. */
export function renderComparison(page: Comparison): string {
  return rendered("compare.hbs", everyText(page));
}

function rendered(main: string, data: object): string {
  const handlebars = Handlebars.create();
  handlebars.registerHelper("ownDrawingUnescaped", ownDrawingUnescaped);
  for (const name of PARTIALS) handlebars.registerPartial(name, template(`partials/${name}.hbs`));
  handlebars.registerPartial("style", template("style.css"));
  const render = handlebars.compile<object>(template(main), {
    strict: true,
    knownHelpersOnly: true,
    knownHelpers: { ownDrawingUnescaped: true },
    preventIndent: true,
  });
  return render(data);
}

/** For drawings of charts/draw.ts only: they hold no text from a plan or a log except what that file escapes. */
function ownDrawingUnescaped(drawing: Drawing): Handlebars.SafeString {
  return new Handlebars.SafeString(drawing.svg);
}

function template(name: string): string {
  return readFileSync(new URL(name, FOLDER), "utf8");
}
