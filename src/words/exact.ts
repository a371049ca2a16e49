import { grouped, MINUS } from "./number.ts";

/** An exact decimal in 10^-9, every digit, thousands set apart: "1,204,377.5". */
export function exact(nano: bigint): string {
  const digits = (nano < 0n ? -nano : nano).toString().padStart(10, "0");
  const places = digits.slice(-9).replace(/0+$/, "");
  return `${nano < 0n ? MINUS : ""}${grouped(digits.slice(0, -9))}${places === "" ? "" : `.${places}`}`;
}
