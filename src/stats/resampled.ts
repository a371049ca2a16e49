import type { BucketCells } from "../cells/types.ts";
import { type BootstrapT, bootstrapT } from "./bootstrap-t.ts";
import { seedOf } from "./generator.ts";
import { normalUpperTail } from "./normal.ts";
import { type Randomisation, randomisation } from "./randomisation.ts";
import type { NotDrawn } from "./resampling.ts";
import type { Counts } from "./share.ts";

/** A contrast looked at by drawing and by dealing its buckets. */
export interface Resampled {
  readonly bootstrap: BootstrapT | NotDrawn;
  readonly randomisation: Randomisation | NotDrawn;
}

/**
 * Bootstrap-t interval at a critical value, the drawn distribution of T, and the randomisation test of one contrast.
 * @param critical on the normal's scale; its two-sided tail is the interval's alpha
 * @param draws as many deals
 * @param numbers whole numbers of both arms by bucket, which alone decide what is drawn
 * @param shares the counts of a proportion, else null
 */
export function resampled(
  cells: BucketCells,
  difference: { readonly estimate: number; readonly standardError: number },
  critical: number,
  draws: number,
  numbers: readonly (readonly (number | bigint)[])[],
  shares: { readonly control: Counts; readonly variant: Counts } | null,
): Resampled {
  const alpha = 2 * normalUpperTail(critical);
  const own = seedOf("cells", numbers);
  return {
    bootstrap: bootstrapT(cells, difference, alpha, draws, seedOf("bootstrap", [own]), shares),
    randomisation: randomisation(cells, draws, seedOf("randomisation", [own]), shares),
  };
}
