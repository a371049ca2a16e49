import { z } from "zod";

// What report.json, what changed in it and an earlier one have in common.
export const outcome = z.enum(["pass", "caution", "fail"]);
export const decision = z.enum(["adopt", "keep-control", "not-settled", "undecidable"]);
export const role = z.enum(["primary", "secondary", "guardrail"]);
export const zone = z.enum([
  "worthwhile",
  "worse",
  "too-small",
  "better",
  "no-worthwhile-gain",
  "not-settled",
  "within",
  "beyond",
]);
export const count = z.number().min(0);
/** From 0 to 1. */
export const share = z.number().min(0).max(1);
export const numberOrNull = z.number().nullable();
export const fingerprint = z.string().regex(/^[0-9a-f]{64}$/);
