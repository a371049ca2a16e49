import { fromCSV } from "arquero";
import { describe, expect, it } from "vitest";
import { effectsCsv } from "../../src/report/csv.ts";
import { reportJson } from "../../src/report/json.ts";
import { several } from "./cases.ts";
import { everyCase } from "./every.ts";
import { hostile } from "./hostile.ts";

describe("effects.csv", () => {
  // read back by Arquero 8.0.3, whose parser follows RFC 4180
  it.each(everyCase)("of the case %s gives each effect of report.json one row, with the same figures", (_, inputs) => {
    const { effects } = reportJson(inputs);
    const rows = read(effectsCsv(effects));
    expect(rows).toHaveLength(effects.length);
    rows.forEach((row, i) => {
      const effect = effects[i];
      expect(row.metric).toBe(effect?.metric);
      expect(row.variant).toBe(effect?.variant);
      expect(number(row.difference)).toBe(effect?.difference.estimate);
      expect(number(row.difference_high)).toBe(effect?.difference.high);
      expect(number(row.relative_low)).toBe(effect?.relative?.low ?? null);
      expect(number(row.control_mean)).toBe(effect?.arms.control.mean);
      expect(number(row.p)).toBe(effect?.difference.p);
      expect(number(row.p_adjusted)).toBe(effect?.difference.pAdjusted);
      expect(number(row.detectable)).toBe(effect?.power.detectable);
    });
  });

  it("leaves the cell empty where a figure does not exist", () => {
    const balance = read(effectsCsv(reportJson(several).effects)).filter((row) => row.metric?.startsWith("Change"));
    expect(balance.map((row) => [row.relative, row.relative_low, row.units_for_worthwhile])).toEqual([
      [null, null, null],
      [null, null, null],
      [null, null, null],
    ]);
  });

  it("ends each line with CR LF and doubles quotes, as RFC 4180 has it", () => {
    const [head = "", first = ""] = effectsCsv(reportJson(hostile).effects).split("\r\n");
    expect(head).toMatch(/^metric,role,summary,variant,/);
    expect(first).toMatch(/^toString,primary,proportion,__proto__,constructor,50150,50150,0\.132,0\.12,/);
    expect(effectsCsv(reportJson(hostile).effects)).toContain('"Support contacts <script>alert(1)</script> ""><img');
  });
});

type Row = { readonly [column: string]: string | null };

function read(text: string): Row[] {
  return fromCSV(text, { autoType: false }).objects() as Row[];
}
const number = (cell: string | null | undefined) => (cell === null ? null : Number(cell));
