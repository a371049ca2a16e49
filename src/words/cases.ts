import { count } from "./number.ts";

/** How often something happens, in cases: "4 of 5", "9 of 10"; what is no such share in whole cases of 100, rounded down. */
export function casesText(share: number): string {
  for (const of of [2, 3, 4, 5, 10, 20]) {
    const cases = share * of;
    if (cases > 0.5 && cases < of - 0.5 && Math.abs(cases - Math.round(cases)) < 1e-9) {
      return `${Math.round(cases)} of ${of}`;
    }
  }
  if (share > 0.99) return "over 99 of 100";
  const whole = Math.floor(share * 100 + 1e-9);
  return whole === 0 ? "fewer than 1 of 100" : `${whole} of 100`;
}

/** A number of units for the reader who plans: up to 1,000 each counts, above it is rounded up to three digits. */
export function atLeast(units: number): string {
  const step = 10 ** Math.max(0, Math.floor(Math.log10(Math.max(1, units))) - 2);
  return count(Math.ceil(Number((units / step).toPrecision(12))) * step);
}

/** So many days of enrolment: "9 days", "5 weeks", "over 3 years"; rounded up, years down. */
export function spanText(days: number): string {
  if (days <= 13) return days === 1 ? "1 day" : `${days} days`;
  if (days <= 730) return `${Math.ceil(days / 7)} weeks`;
  return `over ${count(Math.floor((days - 1) / 365))} years`;
}
