import type { Command } from "commander";
import type { SizeQuestion } from "../decision/index.ts";
import { parseNumber, parsePercent } from "../plan/number.ts";
import { tooLow } from "../plan/rules/decision.ts";
import type { Library } from "./library.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";
import { type CommandFacts, wrongArguments } from "./usage.ts";

interface RawOptions {
  readonly share?: string;
  readonly mean?: string;
  readonly sd?: string;
  readonly worthwhile?: string;
  readonly expected?: string;
  readonly margin?: string;
  readonly goodIs: string;
  readonly allocation: string;
  readonly confidence: string;
  readonly power: string;
  readonly aDay?: string;
  readonly looks?: string;
  readonly spending?: string;
}

/** The command and its options; the words of a plan where a plan has them. */
export function addSize(
  program: Command,
  factsOf: () => CommandFacts,
  terminal: Terminal,
  load: () => Promise<Library>,
  end: (status: ExitStatus) => void,
): void {
  program
    .command("size")
    .summary("units and days that a test to come needs")
    .description(
      "Prints how many units a test to come needs, and how long they take to enrol. Of a share its level is enough; of a mean the standard deviation of one unit's value is needed too. An amount in percent is of the control's level; a number is in the measure's own unit, for a share as 0.006.",
    )
    .usage("--share P|--mean M --sd S --worthwhile A|--margin A [options]")
    .option("--share <P>", "the control's share, such as 12%")
    .option("--mean <M>", "the control's mean")
    .option("--sd <S>", "the standard deviation of one unit's value")
    .option("--worthwhile <A>", "the gain to find, such as 5%")
    .option("--expected <A>", "the gain hoped for: the test is then to show one of more than --worthwhile")
    .option("--margin <A>", "of what must not get worse: the largest harm tolerated")
    .option("--good-is <WAY>", "higher or lower", "higher")
    .option("--allocation <PARTS>", "the planned shares, the control's first, such as 1:1 or 50%:25%:25%", "1:1")
    .option("--confidence <C>", "of the intervals", "95%")
    .option("--power <P>", "how often the gain is to be found", "80%")
    .option("--a-day <N>", "units enrolled a day, all variants together")
    .option("--looks <SHARES>", "planned looks, the last 100%, such as 25%,50%,75%,100%")
    .option("--spending <KIND>", "of the looks: obrien-fleming (default) or pocock")
    .option("--debug", "on a fault of closeout itself, print where it happened")
    .action(async (raw: RawOptions) => {
      const question = questionOf(raw);
      if ("problems" in question) throw wrongArguments(question.problems.join("\n"), factsOf());
      const answered = (await load()).size(question);
      if ("problems" in answered) throw wrongArguments(answered.problems.join("\n"), factsOf());
      terminal.print(answered.text);
      end(0);
    });
}

/** The options as a question, or all that is wrong with them. */
export function questionOf(raw: RawOptions): SizeQuestion | { readonly problems: readonly string[] } {
  const problems: string[] = [];
  const read = <T>(option: string, text: string, value: T | null, expected: string): T | null => {
    if (value === null) problems.push(`--${option} ${text}: expected ${expected}.`);
    return value;
  };
  const share = (option: string, text: string) =>
    read(option, text, between0And1(text), "a share between 0 and 1, such as 12% or 0.12");
  const positive = (option: string, text: string) => read(option, text, above0(text), "a number above 0");
  const amount = (option: string, text: string | undefined) =>
    text === undefined ? null : read(option, text, amountOf(text), "an amount above 0, such as 5% or 0.006");

  const worthwhile = amount("worthwhile", raw.worthwhile);
  const expected = amount("expected", raw.expected);
  const margin = amount("margin", raw.margin);
  const level = levelOf(raw, { share, positive, read }, problems);
  if (raw.worthwhile === undefined && raw.margin === undefined)
    problems.push("Say what the test is to show: --worthwhile, or --margin for what must not get worse.");
  if (raw.worthwhile !== undefined && raw.margin !== undefined)
    problems.push("--worthwhile is for what decides, --margin for what must not get worse: ask one at a time.");
  if (raw.expected !== undefined && raw.worthwhile === undefined)
    problems.push("--expected goes with --worthwhile, the gain that it is to be shown to go beyond.");
  if (
    level?.kind === "mean" &&
    level.mean <= 0 &&
    [worthwhile, expected, margin].some((one) => one?.kind === "relative")
  )
    problems.push("An amount in percent is of the control's level, which is not above 0 here. Write it as a number.");
  const goodIs = read("good-is", raw.goodIs, oneOf(raw.goodIs, ["higher", "lower"] as const), "higher or lower");
  const allocation = read("allocation", raw.allocation, parts(raw.allocation), "two parts or more, such as 1:1");
  const confidence = share("confidence", raw.confidence);
  const power = share("power", raw.power);
  for (const [key, value] of [
    ["confidence", confidence],
    ["power", power],
  ] as const) {
    const low = value === null ? null : tooLow(key, value, `--${key}`);
    if (low !== null) problems.push(low);
  }
  const unitsADay = raw.aDay === undefined ? null : positive("a-day", raw.aDay);
  const looks = looksOf(raw, read, problems);
  const asked =
    worthwhile !== null
      ? ({ kind: "worthwhile", amount: worthwhile, expected } as const)
      : margin !== null
        ? ({ kind: "margin", amount: margin } as const)
        : null;
  if (problems.length > 0) return { problems };
  if (
    level === null ||
    asked === null ||
    goodIs === null ||
    allocation === null ||
    confidence === null ||
    power === null
  )
    throw new Error("options of size were wrong, and nothing was said of them");
  return { level, goodIs, asked, allocation, confidence, power, unitsADay, looks };
}

type Read = <T>(option: string, text: string, value: T | null, expected: string) => T | null;
type ReadNumber = (option: string, text: string) => number | null;

function levelOf(
  { share, mean, sd }: RawOptions,
  read: { readonly share: ReadNumber; readonly positive: ReadNumber; readonly read: Read },
  problems: string[],
): SizeQuestion["level"] | null {
  if (share !== undefined && mean === undefined && sd === undefined) {
    const found = read.share("share", share);
    return found === null ? null : { kind: "share", share: found };
  }
  if (share === undefined && mean !== undefined && sd !== undefined) {
    const level = read.read("mean", mean, numberOf(mean), "a number");
    const spread = read.positive("sd", sd);
    return level === null || spread === null ? null : { kind: "mean", mean: level, sd: spread };
  }
  problems.push("Say the control's level: --share, or --mean together with --sd.");
  return null;
}

function looksOf({ looks, spending }: RawOptions, read: Read, problems: string[]): SizeQuestion["looks"] {
  if (looks === undefined) {
    if (spending !== undefined) problems.push("--spending is of planned looks: add --looks.");
    return null;
  }
  const planned = looks
    .split(",")
    .map((text) => (text.trim() === "1" ? 1 : text.trim() === "100%" ? 1 : between0And1(text)));
  const isRising = planned.every((one, i) => one !== null && one - (planned[i - 1] ?? 0) > 0.01 - 1e-9);
  const isWhole = planned.length >= 2 && planned.length <= 10 && planned.at(-1) === 1 && isRising;
  const kind = spending ?? "obrien-fleming";
  const how = read("spending", kind, oneOf(kind, ["obrien-fleming", "pocock"] as const), "obrien-fleming or pocock");
  const shares = read(
    "looks",
    looks,
    isWhole ? planned.filter((one) => one !== null) : null,
    "2 to 10 rising shares, at least 1% apart, the last 100%, such as 25%,50%,75%,100%",
  );
  return shares === null || how === null ? null : { planned: shares, spending: how };
}

function numberOf(text: string): number | null {
  const decimal = parseNumber(text.trim());
  const value = decimal === null ? Number.NaN : Number(decimal);
  return Number.isFinite(value) ? value : null;
}

function above0(text: string): number | null {
  const value = numberOf(text);
  return value !== null && value > 0 ? value : null;
}

function between0And1(text: string): number | null {
  const percent = parsePercent(text.trim());
  const value = percent === null ? numberOf(text) : Number(percent);
  return value !== null && value > 0 && value < 1 ? value : null;
}

function amountOf(text: string): SizeQuestion["asked"]["amount"] | null {
  const percent = parsePercent(text.trim());
  const value = percent === null ? above0(text) : Number(percent);
  if (value === null || !(value > 0)) return null;
  return { kind: percent === null ? "absolute" : "relative", value };
}

/** All in percent or none, as in a plan. */
function parts(text: string): number[] | null {
  const written = text.split(":");
  const percents = written.filter((part) => part.trim().endsWith("%"));
  if (written.length < 2 || (percents.length > 0 && percents.length < written.length)) return null;
  const read = written.map((part) =>
    percents.length > 0 ? Number(parsePercent(part.trim()) ?? Number.NaN) : above0(part),
  );
  return read.every((part) => part !== null && part > 0) ? read.filter((part) => part !== null) : null;
}

function oneOf<T extends string>(text: string, words: readonly T[]): T | null {
  return words.find((word) => word === text) ?? null;
}
