import { assertWithin } from '../quantities/errors.js';

/** Share of the lower bound of the epidermal limit that no step exceeds. A margin of our own: a fifth, as much as a device may deviate
 *  before it is out of tolerance. @source IEC60601 output tolerance, from memory */
export const greatestFraction = 0.8;

export interface LadderStep {
  readonly fluenceJPerCm2: number;
  readonly fractionOfLimit: number;
}

/** Fluences for test patches, from a fraction of the lower bound of the epidermal limit up to the margin, evenly spaced. Never one number to
 *  treat at. Throws: out-of-range. */
export function testLadder(limitLowJPerCm2: number, firstFraction: number, stepCount: number): LadderStep[] {
  assertWithin('firstFraction', firstFraction, 0.05, greatestFraction);
  const rise = (greatestFraction - firstFraction) / (stepCount - 1);
  return Array.from({ length: stepCount }, (_, i) => {
    const fractionOfLimit = i === stepCount - 1 ? greatestFraction : firstFraction + i * rise;
    return { fluenceJPerCm2: limitLowJPerCm2 * fractionOfLimit, fractionOfLimit };
  });
}
