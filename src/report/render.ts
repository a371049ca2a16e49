import { readFileSync } from "node:fs";
import Handlebars from "handlebars";
import type { Drawing } from "./charts/draw.ts";
import type { Page } from "./page.ts";

/** templates/ lies beside src/ and beside dist/, so one address serves both. */
const FOLDER = new URL("../../templates/", import.meta.url);
const PARTIALS = ["decision", "forest", "contents", "checks", "counted", "metrics", "power", "methods"] as const;

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
  return render(withoutControls(page));
}

/**
 * Control characters and overrides of the writing direction, which a name could use to turn our figures around behind
 * it, become the replacement sign. The plan's text stays as it is: it is shown word for word, in a block of its own.
 */
function withoutControls(page: Page): Page {
  const { planText } = page.methods;
  const clean = cleaned(page) as Page;
  return { ...clean, methods: { ...clean.methods, planText } };
}

function cleaned(value: unknown): unknown {
  if (typeof value === "string") return value.replace(/[^\P{Cc}\n\t]|[\u202a-\u202e\u2066-\u2069]/gu, "\ufffd");
  if (Array.isArray(value)) return value.map(cleaned);
  if (typeof value !== "object" || value === null) return value;
  return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, cleaned(item)]));
}

/** For drawings of charts/draw.ts only: they hold no text from a plan or a log except what that file escapes. */
function ownDrawingUnescaped(drawing: Drawing): Handlebars.SafeString {
  return new Handlebars.SafeString(drawing.svg);
}

function template(name: string): string {
  return readFileSync(new URL(name, FOLDER), "utf8");
}
