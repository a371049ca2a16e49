import type { Check, CheckOutcome, Figure } from "../../checks/types.ts";
import { capital, list, MINUS, number, pCell, plural } from "../../words/index.ts";

/** Section 3: can the data be trusted? Failed checks first, then cautions, the strong ones before the others. */
export interface ChecksSection {
  readonly intro: string;
  readonly open: readonly CheckText[];
  readonly passed: readonly CheckText[];
}
export interface CheckText {
  readonly id: string;
  readonly title: string;
  /** The line of Methods on it, where there is one. */
  readonly term: string;
  /** "failed", "strong caution", "caution", "passed". */
  readonly outcome: string;
  readonly sentence: string;
  readonly remedy: string;
  readonly parts: readonly { readonly about: string; readonly outcome: string; readonly sentence: string }[];
  /** What else it looked at than its sentence tells; of a check that passed that is all there is to say of it. */
  readonly others: string;
  readonly figures: readonly { readonly name: string; readonly value: string }[];
}

export const TITLES: Readonly<Record<string, string>> = {
  allocation: "Groups of the planned size",
  "allocation-by-day": "Groups of the planned size on every day",
  "allocation-by-level": "Groups of the planned size in every subgroup",
  exits: "The same share of each group left",
  rejected: "Rows that could not be read",
  duplicates: "Rows that came twice",
  switched: "Seen in two variants",
  "unknown-variants": "Variants that the plan does not name",
  gaps: "Hours without rows",
  span: "Rows outside the main period",
  "follow-up": "Followed to the end",
  balance: "Groups alike before enrolment",
  filters: "Filters",
  "never-occurs": "Events and variants occur in the log",
  weeks: "Whole weeks",
  "stopped-early": "Planned size reached",
  "one-unit": "No single value rules the result",
  normality: "Normal approximation",
  "without-rows": "Left out for want of a value",
  denominator: "Denominator alike in all groups",
  "plan-changed": "Plan unchanged",
};

const TERMS: Readonly<Record<string, string>> = {
  balance: "method-groups-before-enrolment",
  "one-unit": "method-one-value",
  normality: "method-normal-approximation",
  denominator: "method-ratio-of-totals",
};

const RANK = (check: Check) => (check.result === "fail" ? 0 : check.strong ? 1 : check.result === "caution" ? 2 : 3);

export function checksSection(checks: readonly Check[]): ChecksSection {
  const ordered = checks.toSorted((a, b) => RANK(a) - RANK(b));
  return {
    intro: `${tallyText(checks)}.${checks.length === 0 ? "" : " These are tests of the data, not of the effect."}`,
    open: ordered.filter((check) => check.result !== "pass").map(checkText),
    passed: ordered.filter((check) => check.result === "pass").map(checkText),
  };
}

/** The check that matters most: the first that failed, else the first strong caution, else the first caution. */
export function mostImportant(checks: readonly Check[]): Check | null {
  const [first] = checks.filter((check) => check.result !== "pass").toSorted((a, b) => RANK(a) - RANK(b));
  return first ?? null;
}

/** "12 checks passed, 1 caution", "1 check failed, 11 passed, 1 caution". */
export function tallyText(checks: readonly Check[]): string {
  const count = (result: CheckOutcome) => checks.filter((check) => check.result === result).length;
  const [failed, cautions, passed] = [count("fail"), count("caution"), count("pass")];
  if (checks.length === 0) return "No check was made";
  const parts = [
    ...(failed > 0 ? [`${plural(failed, "check", "checks")} failed`] : []),
    failed > 0 ? `${passed} passed` : `${plural(passed, "check", "checks")} passed`,
    ...(cautions > 0 ? [plural(cautions, "caution", "cautions")] : []),
  ];
  return parts.join(", ");
}

function checkText(check: Check): CheckText {
  return {
    id: check.id,
    title: titleOf(check.id),
    term: TERMS[check.id] ?? "",
    outcome: outcomeText(check.result, check.strong),
    sentence: check.sentence,
    remedy: check.remedy,
    // the check's own sentence is its worst part's: said once
    parts: check.parts
      .filter(({ sentence }) => sentence !== check.sentence)
      .map(({ about, result, sentence }) => ({ about, outcome: outcomeText(result, false), sentence })),
    others: check.parts
      .slice(1)
      .map(({ about }) => about)
      .join("; "),
    figures: figureTexts([...Object.entries(check.figures)], ""),
  };
}

/** The name of a check for the reader. */
export function titleOf(id: string): string {
  return TITLES[id] ?? capital(id.replaceAll("-", " "));
}

function outcomeText(result: CheckOutcome, strong: boolean): string {
  if (result === "caution") return strong ? "strong caution" : "caution";
  return result === "pass" ? "passed" : "failed";
}

/** A check's figures as name and value, nested ones with their path: "counts, calendar". */
function figureTexts(entries: readonly (readonly [string, Figure])[], path: string): { name: string; value: string }[] {
  return entries.flatMap(([key, figure]) => {
    // names below the first level are variants, filters, days: the plan's or the log's own text
    const name = path === "" ? spaced(key) : `${path}, ${key}`;
    if (isRecord(figure)) return figureTexts(Object.entries(figure), name);
    if (Array.isArray(figure)) {
      if (figure.every((item) => typeof item !== "object"))
        return [{ name, value: list(figure.map(figureText)) || "none" }];
      return figureTexts(
        figure.map((item, i) => [String(i + 1), item] as const),
        name,
      );
    }
    const isP = typeof figure === "number" && (key === "p" || key === "pAdjusted");
    return [{ name, value: isP ? pCell(figure) : figureText(figure) }];
  });
}

function isRecord(figure: Figure): figure is { readonly [name: string]: Figure } {
  return typeof figure === "object" && figure !== null && !Array.isArray(figure);
}

function figureText(figure: Figure): string {
  if (typeof figure === "number") return figure !== 0 && Math.abs(figure) < 1e-4 ? tiny(figure) : number(figure);
  if (typeof figure === "boolean") return figure ? "yes" : "no";
  return figure === null ? "does not exist" : String(figure);
}

/** "2.96 × 10⁻¹²". */
function tiny(figure: number): string {
  const [digits = "", exponent = ""] = figure.toExponential(2).split("e-");
  return `${digits.replace("-", MINUS)} \u00d7 10\u207b${[...exponent].map((digit) => SUPERSCRIPTS[Number(digit)]).join("")}`;
}
const SUPERSCRIPTS = [..."\u2070\u00b9\u00b2\u00b3\u2074\u2075\u2076\u2077\u2078\u2079"];

const FIGURE_NAMES: Readonly<Record<string, string>> = { chiSquare: "chi-square", df: "degrees of freedom" };

/** "copiesThatDiffer": "copies that differ". */
function spaced(key: string): string {
  const known = FIGURE_NAMES[key];
  if (known !== undefined) return known;
  return key.replace(/([a-z])([A-Z])/g, (_, before, letter) => `${before} ${letter.toLowerCase()}`);
}
