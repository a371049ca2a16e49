import type { Reduction } from "../engine/types.ts";

/** All analysed units of all arms. */
export function analysedUnits({ unitLines }: Pick<Reduction, "unitLines">): number {
  return unitLines.find(({ id }) => id === "analysed")?.units ?? 0;
}
