import type { BucketCells } from "../cells/types.ts";
import { type BootstrapT, bootstrapT } from "./bootstrap-t.ts";
import { type Seed, seedOf } from "./generator.ts";
import { normalUpperTail } from "./normal.ts";
import { type Randomisation, randomisation } from "./randomisation.ts";
import type { NotDrawn } from "./resampling.ts";
import type { Counts } from "./share.ts";

/** A contrast looked at by drawing and by dealing its buckets. */
export interface Resampled {
  readonly bootstrap: BootstrapT | NotDrawn;
  readonly randomisation: Randomisation | NotDrawn;
}

/** What is to be drawn and dealt for one contrast: data alone, so that another thread can do it. */
export interface ToDraw {
  readonly cells: BucketCells;
  readonly difference: { readonly estimate: number; readonly standardError: number };
  /** On the normal's scale; its two-sided tail is the interval's alpha. */
  readonly critical: number;
  /** As many deals. */
  readonly draws: number;
  /** By `seedOfCells`. */
  readonly seed: Seed;
  /** The counts of a proportion, else null. */
  readonly shares: { readonly control: Counts; readonly variant: Counts } | null;
  /** Whether the drawn distribution is shown, at n/16 and n/4 units too. */
  readonly isPictured: boolean;
}

/** The seed of all draws of one contrast, from whole numbers of both arms by bucket, which alone decide it. */
export function seedOfCells(numbers: readonly (readonly (number | bigint)[])[]): Seed {
  return seedOf("cells", numbers);
}

/** Bootstrap-t interval, the drawn distribution of T, and the randomisation test of one contrast. */
export function resampled({ cells, difference, critical, draws, seed, shares, isPictured }: ToDraw): Resampled {
  const alpha = 2 * normalUpperTail(critical);
  return {
    bootstrap: bootstrapT(cells, difference, alpha, draws, seedOf("bootstrap", [seed]), shares, isPictured),
    randomisation: randomisation(cells, draws, seedOf("randomisation", [seed]), shares),
  };
}
