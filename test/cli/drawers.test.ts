import { fileURLToPath } from "node:url";
import { beforeAll, describe, expect, it } from "vitest";
import { withDrawers as here } from "../../src/drawers.ts";
import { generator } from "../../src/stats/generator.ts";
import { resampled, seedOfCells, type ToDraw } from "../../src/stats/index.ts";
import { meanCells } from "../stats/buckets.ts";
import { build } from "./built.ts";

const next = generator([5, 6, 7, 8]);
const values = (n: number) => Array.from({ length: n }, () => -Math.log((next() + 1) / 2 ** 32));

function toDraw(draws: number): ToDraw {
  return {
    cells: meanCells(values(300), values(200)),
    difference: { estimate: 0.1, standardError: 0.09 },
    critical: 1.96,
    draws,
    seed: seedOfCells([[next()]]),
    shares: null,
    isPictured: true,
  };
}

const many = Array.from({ length: 12 }, () => toDraw(4000));
let withDrawers: typeof here;

beforeAll(async () => {
  build();
  ({ withDrawers } = await import(fileURLToPath(new URL("../../dist/drawers.js", import.meta.url))));
});

describe("draws in threads", () => {
  it("are those that are made here", async () => {
    const found = await withDrawers(many, { threads: 2 }, (draw) => {
      const drawn = many.map(draw);
      expect(drawn.every((one) => one instanceof Promise)).toBe(true);
      return Promise.all(drawn);
    });
    expect(found).toEqual(many.map(resampled));
  });

  it("are made here where they are few, where one thread is to be used, and from the source", async () => {
    const one = toDraw(1000);
    const isHere = async (of: readonly ToDraw[], by: typeof here, threads = 2) =>
      by(of, { threads }, async (draw) => {
        const found = draw(one);
        expect(await found).toEqual(resampled(one));
        return !(found instanceof Promise);
      });
    expect(await isHere(many.slice(0, 9), withDrawers)).toBe(true);
    expect(await isHere(many, withDrawers, 1)).toBe(true);
    expect(await isHere(many, here)).toBe(true);
    expect(await isHere(many, withDrawers)).toBe(false);
  });

  it("warn of nothing, however many listen to one signal", async () => {
    const warnings: string[] = [];
    const listen = ({ name }: Error) => warnings.push(name);
    process.on("warning", listen);
    await withDrawers(many, { threads: 2, signal: new AbortController().signal }, (draw) =>
      Promise.all(many.map(draw)),
    );
    await new Promise(setImmediate);
    process.off("warning", listen);
    expect(warnings).toEqual([]);
  });

  it("end when the run is stopped", async () => {
    const stop = new AbortController();
    const found = withDrawers(many, { threads: 2, signal: stop.signal }, (draw) => {
      const drawn = Promise.all(many.map(draw));
      stop.abort();
      return drawn;
    });
    await expect(found).rejects.toThrow();
    const again = withDrawers(many, { threads: 2, signal: stop.signal }, (draw) => Promise.all(many.map(draw)));
    await expect(again).rejects.toThrow("aborted");
  });
});
