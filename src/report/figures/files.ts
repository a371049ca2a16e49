import type { Page } from "../page.ts";
import type { BeforeAfter } from "../sections/changes.ts";
import type { ChoicesFigure } from "../sections/choices.ts";
import type { DistributionFigure } from "../sections/distribution.ts";
import type { FlowFigure, FlowStep } from "../sections/flow.ts";
import type { ForestTable } from "../sections/forest.ts";
import type { SamplingFigure } from "../sections/sampling.ts";
import type { SubgroupPart } from "../sections/subgroups.ts";
import { type Sheet, type SheetRow, sheetSvg, within } from "./sheet.ts";

export interface FigureFile {
  readonly name: string;
  readonly text: string;
}

/** Every figure of the page as a file of its own, from the same drawings and words. */
export function figureFiles(page: Page): FigureFile[] {
  const { decision, changes, allocation, flow, metrics, afterwards } = page;
  const ofEffects: readonly NamedSheet[] = [
    ...(decision.forest === null ? [] : [{ id: "forest", sheet: forestSheet(decision.forest) }]),
    ...(changes === null ? [] : [{ id: "before-after", sheet: beforeAfterSheet(changes.figure) }]),
    ...metrics.flatMap(({ sampling, accrual, days, subgroups, choices }) => [
      ...sampling.flatMap(({ id, figure }) => (figure === null ? [] : [{ id, sheet: drawnSheet(figure, 280) }])),
      ...[...accrual, ...days].flatMap(({ id, drawing }) =>
        drawing === null ? [] : [{ id, sheet: drawnSheet(drawing, 240) }],
      ),
      ...subgroups.flatMap(subgroupSheet),
      ...choices
        .filter(({ axis }) => axis !== null)
        .map((figure) => ({ id: figure.id, sheet: rowsSheet(figure, CHOICE_COLUMNS) })),
    ]),
    ...(afterwards?.subgroups ?? []).flatMap(subgroupSheet),
  ];
  const ofData: readonly NamedSheet[] = [
    ...allocation.flatMap(({ id, drawing }) => (drawing === null ? [] : [{ id, sheet: drawnSheet(drawing, 240) }])),
    { id: "flow", sheet: flowSheet(flow) },
    ...metrics.flatMap(({ distribution }) =>
      distribution === null ? [] : [{ id: distribution.id, sheet: distributionSheet(distribution) }],
    ),
  ];
  return [...(page.undecidable ? ofEffects.map(warned) : ofEffects), ...ofData].map(({ id, sheet }) => ({
    name: `figures/${id}.svg`,
    text: sheetSvg(sheet),
  }));
}

interface NamedSheet {
  readonly id: string;
  readonly sheet: Sheet;
}

/** In the report that stands at the head of the section; a file is seen alone. */
function warned({ id, sheet }: NamedSheet): NamedSheet {
  return { id, sheet: { ...sheet, note: `This is for finding the fault, not for deciding. ${sheet.note}` } };
}

const [NAME, PLOT, FIGURES, ASKED] = [0, 300, 620, 815] as const;
const PLOT_WIDTH = 300;
const [NAME_ROOM, FIGURES_ROOM, ASKED_ROOM] = [46, 29, 22] as const;

function forestSheet(forest: ForestTable): Sheet {
  const zero = { drawing: forest.zeroLine, x: PLOT, width: PLOT_WIDTH, cut: true };
  const rows = forest.groups.flatMap(({ purpose, measures }): SheetRow[] => [
    { height: 26, texts: [{ x: NAME, text: purpose, look: "group" }], drawings: [zero] },
    ...measures.flatMap(({ metric, several, rows }): SheetRow[] => [
      ...(several ? [{ height: 24, texts: [{ x: NAME, text: metric, room: NAME_ROOM }], drawings: [zero] }] : []),
      ...rows.map(
        (row): SheetRow => ({
          height: 28,
          texts: [
            { x: NAME + (several ? 14 : 0), text: several ? row.variant : metric, room: NAME_ROOM - 2 },
            { x: FIGURES, text: `${row.estimate} ${row.interval}`, room: FIGURES_ROOM },
            { x: ASKED, text: row.asked, look: "quiet", room: ASKED_ROOM },
          ],
          drawings: row.drawing === null ? [] : [{ drawing: row.drawing, x: PLOT, width: PLOT_WIDTH, cut: true }],
        }),
      ),
    ]),
  ]);
  const axis: SheetRow[] = forest.anyDrawn
    ? [{ height: 26, texts: [], drawings: [{ drawing: forest.axis, x: PLOT, width: PLOT_WIDTH, cut: false }] }]
    : [];
  return { title: forest.title, note: forest.reading, rows: [...rows, ...axis] };
}

type RowsFigure = Pick<ChoicesFigure, "title" | "reading" | "rows" | "axis">;
/** Where the columns of a sheet of rows begin, and how many characters the first and the last have room for. */
interface Columns {
  readonly plot: number;
  readonly figures: number;
  readonly stands: number;
  readonly room: readonly [name: number, stands: number];
}
const CHOICE_COLUMNS: Columns = { plot: PLOT, figures: FIGURES, stands: ASKED, room: [NAME_ROOM, ASKED_ROOM] };
/** Values of a column are short, what is said of them is not. */
const LEVEL_COLUMNS: Columns = { plot: 170, figures: 490, stands: 690, room: [25, 42] };

function rowsSheet({ title, reading, rows, axis }: RowsFigure, columns: Columns): Sheet {
  const { plot, figures, stands, room } = columns;
  const lines = rows.map(
    (row): SheetRow => ({
      height: 26,
      texts: [
        { x: NAME, text: row.choice, room: room[0], look: row.isPlanned ? "strong" : "plain" },
        { x: figures, text: `${row.estimate} ${row.interval}`.trim(), room: FIGURES_ROOM },
        { x: stands, text: row.stands, look: "quiet", room: room[1] },
      ],
      drawings: row.drawing === null ? [] : [{ drawing: row.drawing, x: plot, width: PLOT_WIDTH, cut: true }],
    }),
  );
  const last: SheetRow[] =
    axis === null
      ? []
      : [{ height: 26, texts: [], drawings: [{ drawing: axis, x: plot, width: PLOT_WIDTH, cut: false }] }];
  return { title, note: reading, rows: [...lines, ...last] };
}

/** A long name of a measure is cut before its variant, which tells two rows apart. */
function beforeAfterSheet({ title, reading, rows, axis }: BeforeAfter): Sheet {
  const lines = rows.map(({ metric, variant, run, isNow, ...row }) => ({
    ...row,
    choice: `${within(metric, Math.max(8, NAME_ROOM - [...variant].length))}${variant}`,
    stands: run,
    isPlanned: isNow,
  }));
  return rowsSheet({ title, reading, rows: lines, axis }, CHOICE_COLUMNS);
}

function subgroupSheet({ id, title, figure }: SubgroupPart): NamedSheet[] {
  if (figure === null) return [];
  const rows = figure.rows.map(({ level, ...row }) => ({ ...row, choice: level, isPlanned: false }));
  const { reading, axis, plotHead } = figure;
  return [{ id, sheet: rowsSheet({ title: `${title}: ${plotHead}`, reading, rows, axis }, LEVEL_COLUMNS) }];
}

type Drawn = Pick<SamplingFigure, "caption" | "reading" | "drawing">;

/** One drawing with its caption. */
function drawnSheet({ caption, reading, drawing }: Drawn, height: number): Sheet {
  return {
    title: caption,
    note: reading,
    rows: [{ height, texts: [], drawings: [{ drawing, x: 0, width: 340, cut: false }] }],
  };
}

const SHAPE_WIDTH = 340;
const SECOND = 460;

function distributionSheet({ caption, arms, axis, tails, tailsHead, reading }: DistributionFigure): Sheet {
  const outlines = arms.flatMap(({ variant, note, drawing }): SheetRow[] => [
    { height: 22, texts: [{ x: 0, text: `${variant}: ${note}`, room: 58 }], drawings: [] },
    { height: 64, texts: [], drawings: [{ drawing, x: 0, width: SHAPE_WIDTH, cut: false }] },
  ]);
  const [first, ...others] = outlines;
  const beside: SheetRow = {
    height: first?.height ?? 22,
    texts: [...(first?.texts ?? []), { x: SECOND, text: tailsHead, look: "quiet", room: 60 }],
    drawings: [],
  };
  const withTails = others.map((row, i) =>
    i === 0
      ? { ...row, drawings: [...row.drawings, { drawing: tails, x: SECOND, width: SHAPE_WIDTH, cut: false }] }
      : row,
  );
  const foot = { height: Math.max(28, 100 - 86 * (arms.length - 1)), texts: [] };
  return {
    title: caption,
    note: reading,
    rows: [beside, ...withTails, { ...foot, drawings: [{ drawing: axis, x: 0, width: SHAPE_WIDTH, cut: false }] }],
  };
}

const [WORDS, UNITS, SHARE] = [28, 480, 560] as const;

function flowSheet({ caption, trunk, arms, stems }: FlowFigure): Sheet {
  const line = (step: FlowStep): SheetRow => ({
    height: 26,
    texts: [
      { x: WORDS, text: step.text, look: step.total ? "strong" : "quiet", room: 60 },
      { x: UNITS, text: step.units, look: step.total ? "strong" : "plain", end: true },
      ...(step.share === "" ? [] : [{ x: SHARE, text: step.share, look: "quiet" as const, end: true }]),
    ],
    drawings: [{ drawing: stems[step.stem], x: 0, width: 24, cut: true }],
  });
  return {
    title: caption,
    note: "",
    rows: [
      ...trunk.map(line),
      ...arms.flatMap(({ variant, steps }): SheetRow[] => [
        { height: 34, texts: [{ x: 0, text: variant, look: "group", room: 80 }], drawings: [] },
        ...steps.map(line),
      ]),
    ],
  };
}
