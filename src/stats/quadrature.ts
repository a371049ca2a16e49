/**
 * Integral of a smooth function over neighbouring panels, halved where the two rules disagree most.
 *
 * Each panel by Kronrod's 15 points; the 7 points of Gauss among them give the error, far too large where the function is
 * smooth, so the integral has more digits than asked for. No rule touches the ends of a panel.
 * @param points at least two, rising: the ends of the panels. A step or a spike belongs on or between close points, for a
 *   panel that is wide beside it may miss it
 * @param relative the sum of the errors is brought under this share of the integral
 *
 * Source: Piessens, de Doncker-Kapenga, Ueberhuber and Kahaner 1983, QUADPACK, 2.2.1 and 3.1 (QAG, QK15).
 */
export function integral(f: (x: number) => number, points: readonly number[], relative: number): number {
  const panels = points.slice(1).map((to, i) => panel(f, points[i] ?? to, to));
  for (;;) {
    const [total, error] = [sumOf(panels, "value"), sumOf(panels, "error")];
    if (error <= relative * Math.abs(total)) return total;
    if (panels.length > MOST_PANELS) throw new Error(`${error} of ${total} is left after ${panels.length} panels`);
    const worst = panels.reduce((most, { error }, i) => (error > (panels[most]?.error ?? 0) ? i : most), 0);
    const { from, to } = panels[worst] ?? { from: 0, to: 0 };
    const middle = from + (to - from) / 2;
    panels.splice(worst, 1, panel(f, from, middle), panel(f, middle, to));
  }
}

const MOST_PANELS = 5000;

interface Panel {
  readonly from: number;
  readonly to: number;
  readonly value: number;
  readonly error: number;
}

/** Kronrod's 15 points of each panel, in no order; the sum of weight times value is the integral of what is smooth. */
export function nodesOver(points: readonly number[]): { readonly at: number; readonly weight: number }[] {
  return points.slice(1).flatMap((to, i) => {
    const from = points[i] ?? to;
    const [centre, half] = [from + (to - from) / 2, (to - from) / 2];
    return NODES.flatMap(([at, weight]) =>
      at === 0
        ? [{ at: centre, weight: weight * half }]
        : [-half * at, half * at].map((offset) => ({ at: centre + offset, weight: weight * half })),
    );
  });
}

function panel(f: (x: number) => number, from: number, to: number): Panel {
  const [centre, half] = [from + (to - from) / 2, (to - from) / 2];
  let [kronrod, gauss] = [0, 0];
  for (const [at, weight, weightOfGauss] of NODES) {
    const there = at === 0 ? f(centre) : f(centre - half * at) + f(centre + half * at);
    kronrod += weight * there;
    gauss += weightOfGauss * there;
  }
  return { from, to, value: kronrod * half, error: Math.abs(kronrod - gauss) * half };
}

function sumOf(panels: readonly Panel[], part: "value" | "error"): number {
  return panels.reduce((sum, panel) => sum + panel[part], 0);
}

/** Points of [0, 1] with Kronrod's weight and, where it is one of them, Gauss's: QUADPACK, QK15, to a double's digits. */
const NODES: readonly (readonly [at: number, kronrod: number, gauss: number])[] = [
  [0, 0.20948214108472782, 0.4179591836734694],
  [0.20778495500789848, 0.20443294007529889, 0],
  [0.4058451513773972, 0.19035057806478542, 0.3818300505051189],
  [0.5860872354676911, 0.1690047266392679, 0],
  [0.7415311855993945, 0.14065325971552592, 0.27970539148927664],
  [0.8648644233597691, 0.10479001032225019, 0],
  [0.9491079123427585, 0.06309209262997856, 0.1294849661688697],
  [0.9914553711208126, 0.022935322010529224, 0],
];
