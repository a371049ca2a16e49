import type * as entry from "../index.ts";

/** What the command line needs of the library entry. It is loaded on demand, so that help and mistakes in the arguments answer at once. */
export type Library = Pick<
  typeof entry,
  | "blindJsonSchema"
  | "check"
  | "closeout"
  | "compareReports"
  | "planJsonSchema"
  | "reportJsonSchema"
  | "seal"
  | "size"
  | "trace"
  | "verify"
>;

export async function loadLibrary(): Promise<Library> {
  return import("../index.ts");
}
