import type { EmissionInterval } from './emission.js';

const pulseFractions = [0.02, 0.08, 0.2, 0.35, 0.5, 0.65, 0.78, 0.88, 0.95, 1];
const manyIntervals = 8;

/** Times at which to follow temperatures: 0, denser toward the end of each emission interval, where temperatures peak, and after it
 *  in a geometric series that begins at a fraction of the pulse, to `tailS` after the last. Ascending; about `count` of them, more
 *  when there are many pulses (each keeps its start, end and a short tail). */
export function sampleTimesS(emission: readonly EmissionInterval[], tailS: number, count: number): Float64Array {
  const times = new Set<number>([0]);
  const perInterval = emission.length > manyIntervals ? pulseFractions.filter((_, i) => i % 3 === 0) : pulseFractions;
  const gapCount = Math.max(4, Math.floor(count / (2 * emission.length)));
  emission.forEach(({ startS, endS }, index) => {
    times.add(startS);
    for (const fraction of perInterval) times.add(fraction === 1 ? endS : startS + fraction * (endS - startS));
    const next = emission[index + 1];
    if (next)
      for (const timeS of tailTimesS(startS, endS, next.startS - endS, gapCount)) if (timeS < next.startS) times.add(timeS);
  });
  const last = emission[emission.length - 1]!;
  const left = Math.max(16, count - times.size);
  for (const timeS of tailTimesS(last.startS, last.endS, tailS, left)) times.add(timeS);
  return Float64Array.from(times).sort();
}

// Offsets from the end of a pulse: from a fiftieth of the pulse, but not below 1 ns, up to the whole tail.
function tailTimesS(startS: number, endS: number, tailS: number, count: number): number[] {
  const firstS = Math.min(Math.max((endS - startS) / 50, 1e-9), tailS / 10);
  const ratio = (tailS / firstS) ** (1 / (count - 1));
  return Array.from({ length: count }, (_, i) => endS + firstS * ratio ** i);
}
