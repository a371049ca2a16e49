import type { Absent } from "../stats/types.ts";

/** Why a figure does not exist, to follow "since". */
export function because(reason: Absent["absent"], one: string, many: string): string {
  switch (reason) {
    case "no-units":
      return `one of the groups has no ${one} with a value`;
    case "few-units":
      return `one of the groups has fewer than two ${many} with a value`;
    case "zero-variance":
      return `every ${one} has the same value`;
    case "control-near-zero":
      return "the level compared with is not clearly above 0";
    case "zero-denominator":
      return "what it is divided by adds up to 0";
    case "lost-digits":
      return "the values differ by too little beside their size to be measured";
    case "not-built":
      return "this version does not compute it";
    default:
      return unknown(reason);
  }
}

function unknown(reason: never): never {
  throw new Error(`no words for the reason ${String(reason)}`);
}
