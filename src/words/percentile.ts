/**
 * A quantile as people call it, from the plan's decimal text: "0.5" is "median", "0.95" is "95th percentile", "0.999" is
 * "99.9th percentile".
 */
export function percentile(share: string): string {
  const [, places = ""] = share.split(".");
  const padded = places.padEnd(2, "0");
  const whole = padded.slice(0, 2).replace(/^0(?=.)/, "");
  const rest = padded.slice(2).replace(/0+$/, "");
  if (whole === "50" && rest === "") return "median";
  return `${rest === "" ? ordinal(whole) : `${whole}.${rest}th`} percentile`;
}

/** "1st", "2nd", "3rd", "11th", "95th"; of a whole number under 100. */
function ordinal(digits: string): string {
  const ending = /^1\d$/.test(digits) ? undefined : ENDINGS[digits.slice(-1)];
  return digits + (ending ?? "th");
}

const ENDINGS: Readonly<Record<string, string>> = { "1": "st", "2": "nd", "3": "rd" };
