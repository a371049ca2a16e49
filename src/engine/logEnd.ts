/** A day's worth of one source's rows: how many, the first and the last. */
export interface TimeBin {
  readonly source: number;
  readonly rows: number;
  readonly firstUs: bigint;
  readonly lastUs: bigint;
  /** Whether some metric's `of` or `per` matches a row of it. */
  readonly counted: boolean;
}

const LONGEST_GAP_US = 7n * 86_400_000_000n;

/**
 * The log's end (DESIGN 4, rule 7): the earliest end of a source's span, over the sources that hold a row that some metric
 * counts (all, if none does). A span is the run of rows without a gap of more than 7 days that holds most rows; of runs
 * with equally many the later.
 *
 * @param bins of each source in order of time
 * @returns null without rows
 */
export function logEnd(bins: readonly TimeBin[]): bigint | null {
  const sources = [...new Set(bins.map((bin) => bin.source))].map((source) => {
    const own = bins.filter((bin) => bin.source === source);
    return { end: spanEnd(own), counted: own.some((bin) => bin.counted) };
  });
  const counting = sources.filter((source) => source.counted);
  const ends = (counting.length > 0 ? counting : sources).map((source) => source.end);
  const [earliest = null] = [...ends].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0));
  return earliest;
}

function spanEnd(bins: readonly TimeBin[]): bigint {
  const runs: { rows: number; lastUs: bigint }[] = [];
  for (const bin of bins) {
    const run = runs.at(-1);
    if (run === undefined || bin.firstUs - run.lastUs > LONGEST_GAP_US) {
      runs.push({ rows: bin.rows, lastUs: bin.lastUs });
    } else {
      run.rows += bin.rows;
      run.lastUs = bin.lastUs;
    }
  }
  const longest = runs.reduce((a, b) => (b.rows >= a.rows ? b : a));
  return longest.lastUs;
}
