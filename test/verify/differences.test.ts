import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { differences } from "../../src/verify/differences.ts";
import { hunks } from "../../src/verify/lines.ts";

const line = fc.constantFrom<string>("a", "b", "c", "d");

describe("lines that differ", () => {
  it("are none between a text and itself", () => {
    fc.assert(
      fc.property(fc.array(line), (text) => {
        expect(hunks(text, text)).toEqual([]);
      }),
    );
  });

  it("put in the place of the given ones make the other text", () => {
    fc.assert(
      fc.property(fc.array(line), fc.array(line), (given, made) => {
        const text = [...given];
        for (const { at, given: own, made: other } of hunks(given, made).toReversed()) {
          expect(text.slice(at, at + own.length)).toEqual(own);
          text.splice(at, own.length, ...other);
        }
        expect(text).toEqual(made);
      }),
    );
  });

  it("are as few as there can be for one line that came in", () => {
    expect(hunks(["a", "b", "c"], ["a", "x", "b", "c"])).toEqual([{ at: 1, given: [], made: ["x"] }]);
  });
});

// The worked example of Cormen, Leiserson, Rivest and Stein, Introduction to Algorithms, 15.4, from memory: BCBA, four letters.
it("leave as much in common as there is", () => {
  const [a, b] = [[..."ABCBDAB"], [..."BDCABA"]];
  const left = hunks(a, b).reduce((sum, { given }) => sum + given.length, 0);
  expect(a.length - left).toBe(4);
});

const PAGE = `<body>
<h1>Two signs</h1>
<h2 id="decision-title"><span class="number">1</span> Decision</h2>
<p class="lead">Stopped: 60.0 of 100 visitors, 30.0 before.</p>
<h2 id="x"><span class="number">5</span> Each measure</h2>
<h3 id="m">Stopped <span class="purpose">decides</span></h3>
<td class="plot"><svg viewBox="0 0 1 1"><path d="M1,2"/></svg></td>
</body>`;

describe("a difference", () => {
  it("of digits alone is a number, with the words around it and its section", () => {
    expect(differences(PAGE.replace("60.0", "61.0"), PAGE)).toEqual([
      {
        kind: "number",
        where: "section 1, Decision",
        given: "Stopped: 61.0 of 100 visitors, 30.0 before.",
        made: "Stopped: 60.0 of 100 visitors, 30.0 before.",
      },
    ]);
  });

  it("of words, of a drawing and of the page's own marks is told apart, under the nearest headings", () => {
    expect(differences(PAGE.replace("before", "after"), PAGE)).toMatchObject([{ kind: "words" }]);
    expect(differences(PAGE.replace("M1,2", "M1,3"), PAGE)).toMatchObject([
      { kind: "drawing", where: "section 5, Each measure, Stopped decides" },
    ]);
    expect(differences(PAGE.replace('class="lead"', 'class="lead" hidden'), PAGE)).toMatchObject([{ kind: "markup" }]);
  });
});

it("of two pages with little in common leave out the lines that are the same", () => {
  const page = (word: string) =>
    Array.from({ length: 2_500 }, (_, i) => (i % 2 === 0 ? "<tbody>" : `<p>${word} ${i}</p>`));
  const found = differences(page("one").join("\n"), page("two").join("\n"));
  expect(found.some(({ given, made }) => given === made)).toBe(false);
  expect(found.length).toBe(1_250);
});
