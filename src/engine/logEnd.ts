/** Some of one source's rows, within less than 7 days: how many, the first and the last. */
export interface TimeBin {
  readonly source: number;
  readonly rows: number;
  readonly firstUs: bigint;
  readonly lastUs: bigint;
  /** Whether some metric's `of` or `per` matches a row of it. */
  readonly counted: boolean;
}

const LONGEST_GAP_US = 7n * 86_400_000_000n;

/** A source's span: its run of rows without a gap of more than 7 days that holds most of them. */
export interface SourceSpan {
  readonly source: number;
  readonly firstUs: bigint;
  readonly lastUs: bigint;
  /** Rows in the span, and rows outside it. */
  readonly rows: number;
  readonly outside: number;
  readonly counted: boolean;
}

/**
 * The span of every source (DESIGN 4, rule 7); of runs with equally many rows the later.
 *
 * @param bins of each source in order of time
 */
export function spansOf(bins: readonly TimeBin[]): SourceSpan[] {
  const sources = [...new Set(bins.map((bin) => bin.source))].sort((a, b) => a - b);
  return sources.map((source) => {
    const own = bins.filter((bin) => bin.source === source);
    const span = longestRun(own);
    const all = own.reduce((sum, { rows }) => sum + rows, 0);
    return { source, ...span, outside: all - span.rows, counted: own.some((bin) => bin.counted) };
  });
}

/**
 * The log's end (DESIGN 4, rule 7): the earliest end of a source's span, over the sources that hold a row that some metric
 * counts (all, if none does).
 *
 * @returns null without rows
 */
export function logEnd(spans: readonly SourceSpan[]): bigint | null {
  const counting = spans.filter((span) => span.counted);
  const ends = (counting.length > 0 ? counting : spans).map((span) => span.lastUs);
  const [earliest = null] = [...ends].sort((a, b) => (a < b ? -1 : a > b ? 1 : 0));
  return earliest;
}

function longestRun(bins: readonly TimeBin[]): { rows: number; firstUs: bigint; lastUs: bigint } {
  const runs: { rows: number; firstUs: bigint; lastUs: bigint }[] = [];
  for (const bin of bins) {
    const run = runs.at(-1);
    if (run === undefined || bin.firstUs - run.lastUs > LONGEST_GAP_US) {
      runs.push({ rows: bin.rows, firstUs: bin.firstUs, lastUs: bin.lastUs });
    } else {
      run.rows += bin.rows;
      run.lastUs = bin.lastUs;
    }
  }
  return runs.reduce((a, b) => (b.rows >= a.rows ? b : a));
}
