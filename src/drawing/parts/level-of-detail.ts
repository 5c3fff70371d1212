/** How much of the sheet is shown at a zoom: everything, no small print, names only, shapes only. */
export const levels = ['near', 'work', 'plan', 'far'] as const;
export type Level = (typeof levels)[number];

/** Least zoom of every level but the last. */
const thresholds = [0.85, 0.6, 0.35] as const;
const hysteresis = 0.03;

/** The level of detail at a zoom (1 = 100 %). Within 3 % of a threshold the level before is kept, so that it doesn't flicker. */
export const levelOf = (zoom: number, previous?: Level): Level => {
  const plain = thresholds.findIndex((least) => zoom >= least);
  const index = plain === -1 ? thresholds.length : plain;
  if (previous !== undefined) {
    const before = levels.indexOf(previous);
    const crossed = Math.min(before, index);
    const threshold = thresholds[crossed];
    if (
      Math.abs(before - index) === 1 &&
      threshold !== undefined &&
      Math.abs(zoom / threshold - 1) < hysteresis
    )
      return previous;
  }
  return levels[index] ?? 'far';
};

interface LevelMeasures {
  /** Outline of a plate, and a cable. At 60 % and less they are drawn wider, so that none falls under a pixel. */
  readonly outlinePx: number;
  readonly cablePx: number;
  readonly casingPx: number;
  readonly corePx: number;
  readonly tracerPx: number;
}

export const measures: { readonly [level in Level]: LevelMeasures } = {
  near: { outlinePx: 1.8, cablePx: 1.7, casingPx: 11.8, corePx: 9, tracerPx: 8 },
  work: { outlinePx: 1.8, cablePx: 1.7, casingPx: 11.8, corePx: 9, tracerPx: 8 },
  plan: { outlinePx: 2.4, cablePx: 2.6, casingPx: 11.8, corePx: 9, tracerPx: 8 },
  far: { outlinePx: 4, cablePx: 4.5, casingPx: 22, corePx: 14, tracerPx: 13 },
};

/** Jackets on a sheet from which they run side by side so often that widened ones would run into one another. */
const manyJackets = 16;

/**
 * Width of a jacket as drawn: as routed, but never so thin at the far level that it is lost on screen; among many, only as
 * much wider as leaves paper between neighbours.
 */
export const drawnJacketWidth = (width: number, lanes: number, level: Level, jackets = 1): number => {
  if (level !== 'far') return width;
  return jackets > manyJackets ? width + 8 : Math.max(width + 6, lanes === 1 ? 36 : 42);
};
