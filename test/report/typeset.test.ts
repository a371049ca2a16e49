import { describe, expect, it } from "vitest";
import { quotes, unbroken, withoutControls, withUnits } from "../../src/report/typeset.ts";

describe("a text of the page", () => {
  it("has curly quotes around each name", () => {
    expect(quotes('13.2 with "calendar" and 12.0 with "list"')).toBe(
      "13.2 with \u201ccalendar\u201d and 12.0 with \u201clist\u201d",
    );
    expect(quotes('a lone " stays')).toBe('a lone " stays');
  });

  it("has a curly apostrophe within a word and behind a plural, and leaves other strokes alone", () => {
    expect(quotes("The groups' values and each group's own")).toBe("The groups\u2019 values and each group\u2019s own");
    expect(quotes("'a' of 5' 3")).toBe("'a' of 5' 3");
  });

  it("does not break inside a p-value or before the word interval", () => {
    expect(unbroken("as uneven (p < 0.0001), or p = 0.03, on 1 map = 2")).toBe(
      "as uneven (p\u00a0<\u00a00.0001), or p\u00a0=\u00a00.03, on 1 map = 2",
    );
    expect(unbroken("(95% interval: 1% to 2%)")).toBe("(95%\u00a0interval: 1% to 2%)");
  });

  it("does not break between a figure and its unit of measure", () => {
    expect(withUnits("0.018 s higher, 5 kr. and 5 sisters", ["s", "kr."])).toBe(
      "0.018\u00a0s higher, 5\u00a0kr. and 5 sisters",
    );
    expect(withUnits("5 a.b 5 axb", ["a.b"])).toBe("5\u00a0a.b 5 axb");
  });

  it("shows a control character or an override of the writing direction as a sign, and keeps accents and Hebrew", () => {
    expect(withoutControls("a\u0000b\u001bc\u0085d\u202ee\u2067f")).toBe("a\ufffdb\ufffdc\ufffdd\ufffde\ufffdf");
    expect(withoutControls("Bes\u00f8k \u05d1\u05d3\u05d9\u05e7\u05d4\u200f e\u0301\n\t")).toBe(
      "Bes\u00f8k \u05d1\u05d3\u05d9\u05e7\u05d4\u200f e\u0301\n\t",
    );
  });
});
