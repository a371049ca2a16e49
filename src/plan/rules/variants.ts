import { parsePercent } from "../number.ts";
import type { Problem } from "../types.ts";
import { items, type Loose } from "./loose.ts";

/** Exactly one control, and shares that can be compared with one another. */
export function variantRules(plan: Loose): readonly Problem[] {
  const variants = items(plan, "variants");
  if (variants.length === 0) return [];
  return [...controls(variants), ...mixedShares(variants), ...tooMuch(variants)];
}

function controls(variants: ReturnType<typeof items>): readonly Problem[] {
  const [first, ...others] = variants.filter(({ data }) => data.control === true);
  if (first === undefined) {
    const isUnclear = variants.some(({ data }) => "control" in data && typeof data.control !== "boolean");
    const message = "No variant is the control. Write control: true at the one that the others are compared with.";
    return isUnclear ? [] : [{ path: ["variants"], at: "key", message }];
  }
  return others.map(({ path }) => {
    const message = `The control is already ${String(first.data.name)}. Only one variant can be it: remove this one or that.`;
    return { path: [...path, "control"], at: "key", message };
  });
}

/** 50% beside an allocation of 1, or beside none, which is 1 too, would be one to two and hardly meant. */
function mixedShares(variants: ReturnType<typeof items>): readonly Problem[] {
  const isPercent = (value: unknown) => typeof value === "string" && value.trimEnd().endsWith("%");
  const others = variants.filter(({ data }) => !isPercent(data.allocation));
  if (others.length === variants.length) return [];
  return others
    .filter(({ data }) => data.allocation === undefined || typeof data.allocation === "number")
    .map(({ path, data }) => {
      const message = "Another variant has its allocation in percent. Write all of them in percent, or none.";
      return "allocation" in data
        ? { path: [...path, "allocation"], at: "value", message }
        : { path, at: "key", message };
    });
}

/** Shares in percent are of all units; less than all may be in the test, more cannot be. A percent more is rounding. */
function tooMuch(variants: ReturnType<typeof items>): readonly Problem[] {
  const shares = variants.map(({ data }) =>
    typeof data.allocation === "string" ? parsePercent(data.allocation) : null,
  );
  if (shares.includes(null)) return [];
  const percent = shares.reduce((sum, share) => sum + 100 * Number(share), 0);
  if (percent <= 101) return [];
  const message = `The allocations add up to ${Number(percent.toPrecision(6))}%. Correct them, or write parts, such as 1 and 2.`;
  return [{ path: ["variants"], at: "key", message }];
}
