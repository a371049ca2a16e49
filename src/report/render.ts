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
  "sampling",
  "accrual",
  "subgroups",
  "afterwards",
  "power",
  "methods",
] as const;

/** The page as HTML. Everything is escaped by Handlebars; the one door for other text is `ownDrawingUnescaped`. */
export function renderPage(page: Page): string {
  const handlebars = Handlebars.create();
  handlebars.registerHelper("ownDrawingUnescaped", ownDrawingUnescaped);
  for (const name of PARTIALS) handlebars.registerPartial(name, template(`partials/${name}.hbs`));
  handlebars.registerPartial("style", template("style.css"));
  const render = handlebars.compile<Page>(template("report.hbs"), {
    strict: true,
    knownHelpersOnly: true,
    knownHelpers: { ownDrawingUnescaped: true },
    preventIndent: true,
  });
  return render(typeset(page));
}

/** For drawings of charts/draw.ts only: they hold no text from a plan or a log except what that file escapes. */
function ownDrawingUnescaped(drawing: Drawing): Handlebars.SafeString {
  return new Handlebars.SafeString(drawing.svg);
}

function template(name: string): string {
  return readFileSync(new URL(name, FOLDER), "utf8");
}
