import { fixed, plain, withSign } from "./number.ts";

/** A share as percent: "12.0%"; below 1% two digits that count ("0.12%"); never 100% for what is under it. */
export function percent(share: number): string {
  return share === 0 ? "0%" : `${fixed(share * 100, percentDecimals(share))}%`;
}

/** With its sign: "+10.0%", "−1.2%". */
export function signedPercent(share: number): string {
  return withSign(share, percent(share));
}

/** A share that the plan states, with the plan's own digits: "5%", "7.5%". */
export function planPercent(share: number): string {
  return `${plain(share * 100)}%`;
}

function percentDecimals(share: number): number {
  const size = Math.abs(share) * 100;
  if (size >= 1000) return 0;
  if (size < 1) return digits(size);
  return size < 100 && size >= 99.95 ? digits(Number((100 - size).toPrecision(6))) : 1;
}

/** Places so that two digits of a figure under 1 count. */
function digits(size: number): number {
  return Math.min(10, 1 - Math.floor(Math.log10(size)));
}
