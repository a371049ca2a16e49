/** The next step of 1, 2, 2.5 or 5 times a power of ten. */
export function roundStep(size: number): number {
  const power = 10 ** Math.floor(Math.log10(size));
  const factor = [1, 2, 2.5, 5].find((candidate) => candidate * power >= size * 0.999) ?? 10;
  return factor * power;
}

/** Round numbers from low to high, about so many. */
export function roundTicks(low: number, high: number, about: number): number[] {
  const step = roundStep((high - low) / about);
  const first = Math.ceil(low / step);
  const last = Math.floor(high / step);
  return Array.from({ length: last - first + 1 }, (_, i) => Number(((first + i) * step).toPrecision(12)));
}
