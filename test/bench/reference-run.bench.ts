import { figureCount, planRun, runChunk, worstRelativeError } from '../../domain/transport/monte-carlo.js';
import { addChunk, emptyTally } from '../../domain/transport/tally.js';
import { type BenchRow, digits } from './report.js';

const layers = [
  { name: 'epidermis', thicknessUm: 80, absorptionPerCm: 4, scatteringPerCm: 250, anisotropy: 0.85, refractiveIndex: 1.4 },
  { name: 'dermis', thicknessUm: 3000, absorptionPerCm: 0.6, scatteringPerCm: 150, anisotropy: 0.85, refractiveIndex: 1.4 },
  { name: 'fat', thicknessUm: 10000, absorptionPerCm: 0.4, scatteringPerCm: 120, anisotropy: 0.85, refractiveIndex: 1.44 },
];

function secondsTo(relativeError: number, depthMm: number): { seconds: number; photons: number } {
  const plan = planRun({ layers, beams: [{ shape: 'circle', diameterMm: 5 }], depthsUm: [depthMm * 1000] });
  const start = performance.now();
  let tally = emptyTally(figureCount(plan));
  do tally = addChunk(tally, runChunk(plan, 1, tally.chunks, 500));
  while (tally.chunks < 32 || worstRelativeError(plan, tally) > relativeError);
  return { seconds: (performance.now() - start) / 1000, photons: tally.chunks * 500 };
}

/** Cost of a reference run on one core, and how it grows with depth and with accuracy. */
export function benchmark(): BenchRow[] {
  secondsTo(0.05, 1);
  const cases: [number, number][] = [
    [0.01, 1],
    [0.01, 2],
    [0.01, 4],
    [0.005, 1],
    [0.0025, 1],
  ];
  const first = secondsTo(...cases[0]!);
  return cases.map(([error, depthMm], i) => {
    const { seconds, photons } = i === 0 ? first : secondsTo(error, depthMm);
    return {
      what: `reference run to ${error * 100} % at ${depthMm} mm, 5 mm spot`,
      figure: `${digits(seconds)} s (${digits(photons)} photons)`,
      note: i === 0 ? 'one core; skin-like layers' : `${digits(seconds / first.seconds, 2)} times the first`,
    };
  });
}
