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
    case "few-for-rank":
      return `one of the groups has too few ${many} with a value to say how far it can be off`;
    case "no-width":
      return `too many ${many} have the very same value for an interval to have a width`;
    case "same-covariate":
      return `what it would be adjusted for is the same for every ${one} of a group`;
    case "no-covariate":
      return `no ${one} has a value of what it would be adjusted for`;
    case "no-expected-effect":
      return "the plan expects no effect larger than the one that is asked for";
    case "not-for-quantiles":
      return "it is not computed for quantiles";
    case "not-built":
      return "this version does not compute it";
    default:
      return unknown(reason);
  }
}

function unknown(reason: never): never {
  throw new Error(`no words for the reason ${String(reason)}`);
}
