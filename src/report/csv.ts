import type { EffectJson } from "./json-types.ts";

type Cell = string | number | null;

/** One column: its head and what it takes of an effect. Where there is an adjusted difference, that one decides. */
const COLUMNS: readonly (readonly [head: string, cell: (effect: EffectJson) => Cell])[] = [
  ["metric", (e) => e.metric],
  ["role", (e) => e.role],
  ["summary", (e) => e.summary],
  ["variant", (e) => e.variant],
  ["control", (e) => e.control],
  ["variant_units", (e) => e.arms.variant.units],
  ["control_units", (e) => e.arms.control.units],
  ["variant_mean", (e) => e.arms.variant.mean],
  ["control_mean", (e) => e.arms.control.mean],
  ["variant_sd", (e) => e.arms.variant.sd],
  ["control_sd", (e) => e.arms.control.sd],
  ["difference", (e) => e.difference.estimate],
  ["difference_low", (e) => e.difference.low],
  ["difference_high", (e) => e.difference.high],
  ["standard_error", (e) => e.difference.standardError],
  ["z", (e) => e.difference.z],
  ["p", (e) => e.difference.p],
  ["p_adjusted", (e) => e.difference.pAdjusted],
  ["method", (e) => e.difference.method],
  ["relative", (e) => e.relative?.estimate ?? null],
  ["relative_low", (e) => e.relative?.low ?? null],
  ["relative_high", (e) => e.relative?.high ?? null],
  ["adjusted_difference", (e) => e.adjusted?.difference.estimate ?? null],
  ["adjusted_difference_low", (e) => e.adjusted?.difference.low ?? null],
  ["adjusted_difference_high", (e) => e.adjusted?.difference.high ?? null],
  ["adjusted_standard_error", (e) => e.adjusted?.difference.standardError ?? null],
  ["adjusted_z", (e) => e.adjusted?.difference.z ?? null],
  ["adjusted_p", (e) => e.adjusted?.difference.p ?? null],
  ["adjusted_p_adjusted", (e) => e.adjusted?.difference.pAdjusted ?? null],
  ["adjusted_method", (e) => e.adjusted?.difference.method ?? null],
  ["adjusted_relative", (e) => e.adjusted?.relative?.estimate ?? null],
  ["adjusted_relative_low", (e) => e.adjusted?.relative?.low ?? null],
  ["adjusted_relative_high", (e) => e.adjusted?.relative?.high ?? null],
  ["theta", (e) => e.adjusted?.theta ?? null],
  ["variance_reduction", (e) => e.adjusted?.varianceReduction ?? null],
  ["zone", (e) => e.zone],
  ["detectable", (e) => e.power.detectable],
  ["units_for_worthwhile", (e) => e.power.unitsForWorthwhile],
];

/** effects.csv: one row an effect, RFC 4180 (comma, CRLF, quotes doubled). What does not exist is an empty cell. */
export function effectsCsv(effects: readonly EffectJson[]): string {
  const lines = [COLUMNS.map(([head]) => head), ...effects.map((effect) => COLUMNS.map(([, cell]) => cell(effect)))];
  return lines.map((cells) => `${cells.map(cellText).join(",")}\r\n`).join("");
}

/** Decimal text without an exponent would lose digits of a small p; spreadsheets and parsers read 1.2e-9. */
function cellText(cell: Cell): string {
  if (cell === null) return "";
  const text = String(cell);
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
