import { normalUpperTail } from "./normal.ts";
import { nodesOver } from "./quadrature.ts";

/**
 * The statistics Z_1, Z_2, … of several looks at one test, while none of them has reached its boundary.
 *
 *   Z_k sqrt(t_k) = Z_j sqrt(t_j) + E sqrt(t_k - t_j),   j the look before, t the shares of the planned size
 * Each Z_k is standard normal without a difference; so what is left of its density below the boundary of look k comes from
 * what was left at look j by one integral (recursive numerical integration). Boundaries lie on both sides, +-c_k, so the
 * density is even and is kept for z >= 0 alone.
 *
 * Source: Armitage, McPherson and Rowe 1969, JRSS A 132, 235-244; Jennison and Turnbull 2000, Group Sequential Methods
 * with Applications to Clinical Trials, ch. 19.
 */
export interface Paths {
  readonly t: number;
  /** Points z >= 0 below the boundary, each with its part of the probability. */
  readonly points: readonly { readonly z: number; readonly mass: number }[];
}

/** Beyond it lies under 1e-16 of a standard normal. */
const FAR = 8.5;
/** Panels of so many widths of what is integrated: 15 points on each leave an error under 1e-12. */
const WIDTHS = 3;

/** P(Z_k >= c and no boundary reached before) at the share t. @param before the paths of the look before; null at the first */
export function tailOf(before: Paths | null, t: number, c: number): number {
  if (before === null) return normalUpperTail(c);
  const step = stepOf(before, t);
  return before.points.reduce(
    (sum, { z, mass }) => sum + mass * (normalUpperTail(step(c, z)) + normalUpperTail(step(c, -z))),
    0,
  );
}

/**
 * P(Z_k >= c and no boundary reached before) where there is a difference: Z_k then has the mean drift sqrt(t_k).
 *
 * Z_j is sufficient, so a path that stands at z has exp(drift sqrt(t_j) z - drift^2 t_j / 2) times the chance that it has
 * without a difference, and the paths themselves need no second integral.
 * @param drift the mean of Z at the share 1
 */
export function tailWith(drift: number, before: Paths | null, t: number, c: number): number {
  if (before === null) return normalUpperTail(c - drift * Math.sqrt(t));
  const step = stepOf(before, t);
  const ahead = drift * Math.sqrt(t - before.t);
  const slope = drift * Math.sqrt(before.t);
  const fromPath = (z: number) => Math.exp(slope * z - slope ** 2 / 2) * normalUpperTail(step(c, z) - ahead);
  return before.points.reduce((sum, { z, mass }) => sum + mass * (fromPath(z) + fromPath(-z)), 0);
}

/** The paths that look k leaves: those below its boundary. @param next the share of the look after, which sets the grid */
export function pathsBelow(before: Paths | null, t: number, boundary: number, next: number): Paths {
  const widthOf = (from: number, to: number, of: number) => Math.sqrt((to - from) / of);
  const width = Math.min(1, before === null ? 1 : widthOf(before.t, t, t), widthOf(t, next, t));
  const end = Math.min(boundary, FAR);
  const panels = Math.max(1, Math.ceil(end / (WIDTHS * width)));
  const ends = Array.from({ length: panels + 1 }, (_, i) => (end * i) / panels);
  const points = nodesOver(ends).map(({ at, weight }) => ({ z: at, mass: weight * densityOf(before, t, at) }));
  return { t, points };
}

function densityOf(before: Paths | null, t: number, at: number): number {
  if (before === null) return density(at);
  const step = stepOf(before, t);
  const jacobian = Math.sqrt(t / (t - before.t));
  return (
    before.points.reduce((sum, { z, mass }) => sum + mass * (density(step(at, z)) + density(step(at, -z))), 0) *
    jacobian
  );
}

/** The standardised step that leads from z at the look before to c at this one. */
function stepOf({ t: s }: Paths, t: number): (c: number, z: number) => number {
  const [root, rootBefore, rootStep] = [Math.sqrt(t), Math.sqrt(s), Math.sqrt(t - s)];
  return (c, z) => (c * root - z * rootBefore) / rootStep;
}

const DENSITY_AT_0 = 0.3989422804014327; // 1 / sqrt(2 pi)

function density(z: number): number {
  return DENSITY_AT_0 * Math.exp((-z * z) / 2);
}
