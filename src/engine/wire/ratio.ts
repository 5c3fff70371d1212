/** A rate of packets that need not be whole: exact, so that rounding happens once, at the end. */
export interface Ratio {
  readonly numerator: bigint;
  readonly denominator: bigint;
}

/** Product of a ratio and a whole number over another, rounded down: for what is available. */
export const scaledDown = (ratio: Ratio, times: bigint, per: bigint): number =>
  Number((ratio.numerator * times) / (ratio.denominator * per));

/** The same rounded up: for what is needed. */
export function scaledUp(ratio: Ratio, times: bigint, per: bigint): number {
  const divisor = ratio.denominator * per;
  return Number((ratio.numerator * times + divisor - 1n) / divisor);
}
