import type { Absent } from "./types.ts";

/** Whether a figure does not exist, so that what is left is the figure itself. */
export function isAbsent<Figure>(figure: Figure | Absent): figure is Absent {
  return typeof figure === "object" && figure !== null && "absent" in figure;
}
