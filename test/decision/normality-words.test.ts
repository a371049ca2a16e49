import { describe, expect, it } from "vitest";
import {
  largestShareSentence,
  notDrawnReason,
  shapesSentence,
  tailsSentence,
  undefinedDrawsSentence,
  unitsForTailsSentence,
} from "../../src/decision/normality-words.ts";

const visitors = { one: "visitor", many: "visitors" };
const pair = (lowerTail: number, upperTail: number) => ({ lowerTail, upperTail });

describe("the words on the normal approximation", () => {
  it("name both tails, the corrected interval and whether the conclusion stays", () => {
    const tails = { nominal: 0.025, reported: pair(0.0338, 0.0161), level: "caution" } as const;
    expect(tailsSentence(tails, { interval: "+5.8% to +13.9%", conclusion: "stays" })).toBe(
      "The nominal 2.5% tails are about 3.4% below the truth and 1.6% above it; the corrected interval is +5.8% to +13.9%; the conclusion stays.",
    );
    expect(tailsSentence({ ...tails, level: "strong" }, { interval: "+5.8% and up", conclusion: "changes" })).toBe(
      "The nominal 2.5% tails are about 3.4% below the truth and 1.6% above it, so the interval cannot be taken at its word; the corrected interval is +5.8% and up; the conclusion changes.",
    );
    expect(tailsSentence(tails, null)).toBe("The nominal 2.5% tails are about 3.4% below the truth and 1.6% above it.");
  });

  it("say so where both tails are near", () => {
    expect(tailsSentence({ nominal: 0.025, reported: pair(0.0261, 0.024), level: "near" }, null)).toBe(
      "The nominal 2.5% tails are about 2.6% below the truth and 2.4% above it: the normal approximation is good enough here.",
    );
  });

  it("have a place more for the narrower tails of several variants", () => {
    expect(tailsSentence({ nominal: 0.0125, reported: pair(0.0127, 0.0123), level: "near" }, null)).toContain(
      "nominal 1.25% tails are about 1.27% below the truth and 1.23% above it",
    );
  });

  it("tell the tails of own and of pooled shapes apart", () => {
    expect(shapesSentence({ nominal: 0.025, own: pair(0.05, 0.01), pooled: pair(0.025, 0.025) }, visitors)).toBe(
      "The visitors of the two groups are spread in different ways: with each group's own shape the tails are 5.0% and 1.0%, with one shape for both 2.5% and 2.5%.",
    );
  });

  it("point at one unit only where it holds too much", () => {
    const share = (ofSquares: number, level: "near" | "caution" | "strong") => ({ ofSquares, ofCubes: 0.5, level });
    expect(largestShareSentence(share(0.01, "near"), "calendar", visitors)).toBeNull();
    expect(largestShareSentence(share(0.081, "caution"), "calendar", visitors)).toBe(
      'One visitor with "calendar" holds 8.1% of the spread of all of them: that is much for one visitor, and the interval leans on it.',
    );
    expect(largestShareSentence(share(0.4, "strong"), "calendar", visitors)).toBe(
      'One visitor with "calendar" holds 40.0% of the spread of all of them: whether this metric has a variance at all is doubtful, and no number of visitors would make its interval right without a cap.',
    );
  });

  it("say how many units it takes, or that it cannot be told, beside the rules of thumb", () => {
    const rule = { kohavi: 35_500, cochran: 2500 };
    const rules =
      "By rules of thumb each group needs 2,500 (25 times the squared skewness, Cochran 1977) or 35,500 (355 times, Kohavi and others 2014).";
    expect(unitsForTailsSentence(3113, rule, visitors)).toBe(
      `Both tails are within a fifth of their nominal size from at least 3,113 visitors in all on. ${rules}`,
    );
    expect(unitsForTailsSentence(null, rule, visitors)).toBe(
      `How many visitors it would take for both tails to be within a fifth of their nominal size cannot be told from these data: a few of them decide the skewness. ${rules}`,
    );
  });

  it("say why nothing was drawn, and what was left out", () => {
    expect(
      (["few-units", "few-events", "no-spread", "undefined-draws"] as const).map((notDrawn) =>
        notDrawnReason({ notDrawn }, visitors),
      ),
    ).toEqual([
      "one of the groups has under 20 visitors",
      "one of the groups has under 10 visitors with the event, or under 10 without it",
      "every visitor has the same value",
      "more than 1% of the draws have no spread or nothing to divide by",
    ]);
    expect(undefinedDrawsSentence(0, 4000)).toBeNull();
    expect(undefinedDrawsSentence(1, 4000)).toContain("1 of 4,000 draws was left out");
    expect(undefinedDrawsSentence(12, 4000)).toContain("12 of 4,000 draws were left out");
  });
});
