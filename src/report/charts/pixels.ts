import type { TopLevelSpec } from "vega-lite";
import { theme } from "./theme.ts";

/** Layers of a drawing whose places are worked out beforehand, in pixels from its left upper corner. */
export type Layer = Extract<TopLevelSpec, { layer: unknown }>["layer"][number];
export type Point = Readonly<Record<"x" | "y" | "base" | "group", number>>;
export type Stroke = Readonly<Record<"x" | "y" | "toX" | "toY", number>>;
export type Letters = { readonly x: number; readonly y: number; readonly text: string };

export function inPixels(width: number, height: number, layer: Layer[]): TopLevelSpec {
  return {
    $schema: "https://vega.github.io/schema/vega-lite/v6.json",
    width,
    height,
    padding: 0,
    autosize: "none",
    background: "transparent",
    config: { aria: false, view: { stroke: null } },
    layer,
  };
}

/** A field of the data that holds a place. */
export const pixels = (field: string) => ({ field, type: "quantitative", scale: null, axis: null }) as const;

/** Filled from each point down to its base; points of one group are one area. */
export function area(points: readonly Point[], opacity = 0.6): Layer {
  return {
    data: { values: [...points] },
    mark: { type: "area", color: theme.ink, opacity },
    encoding: {
      x: pixels("x"),
      y: pixels("y"),
      y2: { field: "base" },
      detail: { field: "group", type: "nominal" },
      order: { value: 0 },
    },
  };
}

export function line(dash: readonly number[], color: string, points: readonly Point[], width = 1): Layer {
  return {
    data: { values: [...points] },
    mark: { type: "line", color, strokeWidth: width, strokeDash: [...dash] },
    encoding: {
      x: pixels("x"),
      y: pixels("y"),
      detail: { field: "group", type: "nominal" },
      order: { value: 0 },
    },
  };
}

export function strokes(dash: readonly number[], color: string, from: readonly Stroke[], width = 1): Layer {
  return {
    data: { values: [...from] },
    mark: { type: "rule", color, strokeWidth: width, strokeDash: [...dash] },
    encoding: { x: pixels("x"), y: pixels("y"), x2: { field: "toX" }, y2: { field: "toY" } },
  };
}

export function letters(align: "left" | "center" | "right", color: string, texts: readonly Letters[]): Layer {
  return {
    data: { values: [...texts] },
    mark: { type: "text", align, baseline: "alphabetic", color, font: theme.font, fontSize: theme.letters - 1 },
    encoding: { x: pixels("x"), y: pixels("y"), text: { field: "text", type: "nominal" } },
  };
}
