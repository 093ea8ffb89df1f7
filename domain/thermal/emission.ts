import type { Pulse } from '../beam/pulse.js';
import { DomainError } from '../quantities/errors.js';

/** Part of the emission during which power is constant. `energyFraction` is its share of the energy of ONE pulse:
 *  the fractions of a train of n pulses sum to n. Time 0 is the start of the first pulse. */
export interface EmissionInterval {
  readonly startS: number;
  readonly endS: number;
  readonly energyFraction: number;
}

/** Pulses on the same place. */
export interface PulseTrain {
  readonly repetitionRateHz: number;
  readonly pulseCount: number;
}

/** When light is emitted: the sub-pulses of one pulse, repeated by the train; ascending and without overlap. Of a train of more than
 *  200 pulses those in the middle are spread evenly over their time.
 *  Throws: out-of-range (duration, count, rate), contradiction (overlap, fractions that do not sum to 1, pulse beyond the period). */
export function emissionIntervals(pulse: Pulse, train?: PulseTrain): EmissionInterval[] {
  const single = singlePulse(pulse);
  if (train === undefined || train.pulseCount === 1) return single;
  const { repetitionRateHz, pulseCount } = train;
  if (!(repetitionRateHz > 0 && repetitionRateHz <= 1e9)) outOfRange('repetitionRateHz', repetitionRateHz, 0, 1e9);
  if (!(Number.isInteger(pulseCount) && pulseCount >= 1 && pulseCount <= 1e5)) outOfRange('pulseCount', pulseCount, 1, 1e5);
  const periodS = 1 / repetitionRateHz;
  const last = single[single.length - 1]!;
  if (last.endS - single[0]!.startS > periodS * (1 + 1e-9)) {
    throw new DomainError('contradiction', 'the pulse is longer than the period of its train', {
      fields: ['pulse', 'repetitionRateHz'],
      pulseS: last.endS - single[0]!.startS,
      periodS,
    });
  }
  const pulseAt = (index: number): EmissionInterval[] =>
    single.map((part) => ({ ...part, startS: part.startS + index * periodS, endS: part.endS + index * periodS }));
  if (pulseCount <= separateFirst + separateLast) return Array.from({ length: pulseCount }, (_, index) => pulseAt(index)).flat();
  const resumeAt = pulseCount - separateLast;
  return [
    ...Array.from({ length: separateFirst }, (_, index) => pulseAt(index)).flat(),
    { startS: separateFirst * periodS, endS: resumeAt * periodS, energyFraction: resumeAt - separateFirst },
    ...Array.from({ length: separateLast }, (_, index) => pulseAt(resumeAt + index)).flat(),
  ];
}

/** Pulses of a long train that are kept apart at its start and its end. What lies between is given as even emission of the same mean
 *  power: it heats the same, and the hottest moments come at the end. */
const separateFirst = 50;
const separateLast = 150;

/** End of the last interval. */
export function emissionEndS(emission: readonly EmissionInterval[]): number {
  return emission[emission.length - 1]!.endS;
}

function singlePulse(pulse: Pulse): EmissionInterval[] {
  if ('durationS' in pulse) {
    assertDuration('pulse.durationS', pulse.durationS);
    return [{ startS: 0, endS: pulse.durationS, energyFraction: 1 }];
  }
  const parts = [...pulse.subPulses].sort((a, b) => a.startS - b.startS);
  if (parts.length === 0)
    throw new DomainError('contradiction', 'a pulse needs at least one sub-pulse', { fields: ['pulse.subPulses'] });
  let previousEndS = 0;
  let sum = 0;
  for (const part of parts) {
    assertDuration('pulse.subPulses.durationS', part.durationS);
    if (!(part.startS >= previousEndS * (1 - 1e-12))) {
      throw new DomainError('contradiction', 'sub-pulses overlap or start before 0', { fields: ['pulse.subPulses'] });
    }
    if (!(part.energyFraction > 0)) outOfRange('pulse.subPulses.energyFraction', part.energyFraction, 0, 1);
    previousEndS = part.startS + part.durationS;
    sum += part.energyFraction;
  }
  if (!(Math.abs(sum - 1) < 1e-6)) {
    throw new DomainError('contradiction', `energy fractions sum to ${sum}, not to 1`, { fields: ['pulse.subPulses'], sum });
  }
  return parts.map(({ startS, durationS, energyFraction }) => ({ startS, endS: startS + durationS, energyFraction }));
}

function assertDuration(quantity: string, durationS: number): void {
  if (!(durationS >= 1e-15 && durationS <= 1e4)) outOfRange(quantity, durationS, 1e-15, 1e4);
}

function outOfRange(quantity: string, value: number, min: number, max: number): never {
  throw new DomainError('out-of-range', `${quantity} is ${value}; it must lie between ${min} and ${max}`, {
    quantity,
    value: Number.isFinite(value) ? value : String(value),
    min,
    max,
  });
}
