const DIGITS = 12;

/**
 * A copy in which every number has 12 significant digits, by one rule for the whole of report.json. Keys keep their
 * order. A number that is not finite, an undefined or anything that JSON cannot hold is our mistake and throws with its
 * path, since a reader must never see it as a silent null.
 */
export function twelveDigits<T>(value: T, path = "report"): T {
  return rounded(value, path) as T;
}

function rounded(value: unknown, path: string): unknown {
  if (value === null || typeof value === "string" || typeof value === "boolean") return value;
  if (typeof value === "number") {
    if (!Number.isFinite(value)) throw new Error(`${path} is ${value}; a figure that does not exist must be null`);
    return Number(value.toPrecision(DIGITS));
  }
  if (Array.isArray(value)) return value.map((item, i) => rounded(item, `${path}[${i}]`));
  if (typeof value === "object") {
    // fromEntries, not assignment: a variant may be called __proto__
    return Object.fromEntries(Object.entries(value).map(([key, item]) => [key, rounded(item, `${path}.${key}`)]));
  }
  throw new Error(`${path} is ${typeof value}; JSON cannot hold it`);
}
