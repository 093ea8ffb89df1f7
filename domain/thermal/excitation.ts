import type { EmissionInterval } from './emission.js';

/** Follows, for a set of decaying modes, the response to an emission of unit energy per pulse:
 *  e(t) = integral of power(s) exp(-rate (t - s)) ds. Times may only go forward; the cost is one exponential per mode and step,
 *  whatever the number of pulses. */
export class Excitation {
  readonly amplitudes: Float64Array;
  #nowS: number;
  #next = 0;

  constructor(
    readonly ratesPerS: Float64Array,
    readonly emission: readonly EmissionInterval[],
    startS: number,
  ) {
    this.amplitudes = new Float64Array(ratesPerS.length);
    this.#nowS = startS;
    while (this.#next < emission.length && emission[this.#next]!.endS <= startS) this.#next++;
  }

  advanceTo(timeS: number): void {
    while (this.#next < this.emission.length && this.#nowS < timeS) {
      const { startS, endS, energyFraction } = this.emission[this.#next]!;
      if (startS >= timeS) break;
      if (startS > this.#nowS) this.#step(startS - this.#nowS, 0);
      const fromS = Math.max(startS, this.#nowS);
      const toS = Math.min(endS, timeS);
      this.#step(toS - fromS, energyFraction / (endS - startS));
      this.#nowS = toS;
      if (toS === endS) this.#next++;
    }
    if (timeS > this.#nowS) this.#step(timeS - this.#nowS, 0);
    this.#nowS = Math.max(this.#nowS, timeS);
  }

  #step(durationS: number, power: number): void {
    const { amplitudes, ratesPerS } = this;
    for (let mode = 0; mode < amplitudes.length; mode++) {
      const x = ratesPerS[mode]! * durationS;
      const lost = Math.expm1(-x);
      const amplitude = amplitudes[mode]!;
      amplitudes[mode] = amplitude + amplitude * lost + (power === 0 ? 0 : power * durationS * (x === 0 ? 1 : -lost / x));
    }
  }
}
