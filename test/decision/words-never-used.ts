/** Words that no page, message or file of ours uses (PAGES), as whole words in any case. */
export const NEVER_USED =
  /\b(lift|uplift|winner|loser|champion|chance to beat|probability to be best|conversions?|exposures?|scorecard|health|segments?|ship|roll out|traffic|variations?|stat sig|confident|improvement|baseline|unit|units|contrast|arms?|significant(ly)?)\b/i;

/** What may not stand in any text for a reader: a figure that does not exist, doubled spaces or stops, a bare sign. */
export const BROKEN = /NaN|undefined|null|Infinity|\[object| {2}| \.|\.\.|,,|\(\)|: \.|-\d/;
