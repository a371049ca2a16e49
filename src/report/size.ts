import { levelAt, pointsText, type SizeAnswer, type SizeQuestion } from "../decision/index.ts";
import { casesText, count, fixed, list, plain, planPercent, plural, signedPercent, spanText } from "../words/index.ts";

/** The size of a test to come, as `closeout size` prints it. */
export function sizeText(question: SizeQuestion, answer: SizeAnswer): string {
  const { total } = answer;
  return [
    `${askedText(question, answer)},`,
    `in ${casesText(question.power)} tests, with ${planPercent(question.confidence)} intervals${variantsText(question)}:`,
    "",
    `  ${unitsText(answer.units)}, ${count(total)} in all`,
    ...daysLines(question, answer),
    ...looksLines(question, answer),
    ...roughLines(question, answer),
    "",
    `In the plan: planned: {units: ${total}}`,
  ].join("\n");
}

/** "To show a gain of 5% (12% to 12.6%)", and what is taken for true where the effect asked for is not it. */
function askedText(question: SizeQuestion, { amount, expected }: SizeAnswer): string {
  const { asked, level, goodIs } = question;
  const from = levelText(question, level.kind === "share" ? level.share : level.mean);
  const to = (by: number) => levelText(question, levelAt(question, by));
  if (asked.kind === "margin") {
    const worse = goodIs === "higher" ? "falls by less" : "rises by less";
    return `To show that ${from} ${worse} than ${amountText(question, asked.amount)} (to ${to(amount)}), if nothing changes`;
  }
  const gain = goodIs === "higher" ? "a gain" : "a fall";
  if (asked.expected === null || expected === null)
    return `To show ${gain}, if it is ${amountText(question, asked.amount)} (${from} to ${to(amount)})`;
  return `To show ${gain} of more than ${amountText(question, asked.amount)} (${from} to ${to(amount)}), if it is ${amountText(question, asked.expected)} (${to(expected)})`;
}

function amountText(
  { level }: SizeQuestion,
  { kind, value }: { readonly kind: string; readonly value: number },
): string {
  if (kind === "relative") return planPercent(value);
  return level.kind === "share" ? pointsText(value) : plain(value);
}

function levelText({ level }: SizeQuestion, value: number): string {
  return level.kind === "share" ? planPercent(Number(value.toPrecision(4))) : plain(Number(value.toPrecision(6)));
}

function variantsText({ allocation }: SizeQuestion): string {
  const variants = allocation.length - 1;
  return variants === 1 ? "" : ` that hold for ${variants === 2 ? "both" : `all ${variants}`} variants at once`;
}

/** "47,222 units in each variant" counts the control too; unequal ones are named one by one. */
function unitsText(units: readonly number[]): string {
  const [control = 0, ...variants] = units;
  if (variants.every((n) => n === control))
    return `${plural(control, "unit", "units")} with the control and with each variant`;
  const [only] = variants;
  const each =
    variants.length === 1 && only !== undefined
      ? [`${count(only)} with the variant`]
      : variants.map((n, i) => `${count(n)} with variant ${i + 1}`);
  return list([`${plural(control, "unit", "units")} with the control`, ...each]);
}

function daysLines({ unitsADay }: SizeQuestion, { days }: SizeAnswer): string[] {
  if (days === null || unitsADay === null) return [];
  const span = spanText(days);
  const exact = span === `${days} days` || days === 1 ? span : `${plural(days, "day", "days")} (${span})`;
  return [`  ${exact} of enrolment at ${plain(unitsADay)} a day; follow-up comes on top`];
}

/** What the looks cost: "  2.7% more than with a single look: …". */
function looksLines({ looks }: SizeQuestion, { single, critical, total }: SizeAnswer): string[] {
  if (looks === null || single === null) return [];
  const more =
    total === single.total ? "no more" : `${signedPercent(total / single.total - 1).replace(/^\+/, "")} more`;
  const z = (value: number) => fixed(value, 2);
  return [
    `  ${more} than with a single look (${count(single.total)}), for ${looks.planned.length} looks at ${list(looks.planned.map(planPercent))}:`,
    `  the last is held to ${z(critical)} standard errors, a single one to ${z(single.critical)}`,
  ];
}

/** Where the analysis of so few leaves the normal curve, on which the size rests. */
function roughLines({ level }: SizeQuestion, { units }: SizeAnswer): string[] {
  const [control = 0] = units;
  if (level.kind === "mean")
    return Math.min(...units) < 200 ? ["  under 200 in a group Student\u2019s t asks for about one more in each"] : [];
  const fewest = Math.min(level.share, 1 - level.share) * control;
  return fewest < 10
    ? ["  a rough size: with under 10 events in the control, or under 10 units without, the score interval counts"]
    : [];
}
