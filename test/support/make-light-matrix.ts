// Recomputes test/checks/truth/light-matrix.csv by Monte Carlo: npx tsx test/support/make-light-matrix.ts
import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { stringify } from 'csv-stringify/sync';
import { Remarks } from '../../domain/quantities/caution.js';
import { resolveSkin } from '../../domain/tissue/skin.js';
import type { Phototype } from '../../domain/tissue/skin-figures.js';
import { skinLayers } from '../../domain/tissue/skin-layers.js';
import type { BeamProfile } from '../../domain/transport/beam-profile.js';
import { answerRun, figureCount, planRun, type RunQuestion, runChunk } from '../../domain/transport/monte-carlo.js';
import { addChunk, emptyTally, standardErrors } from '../../domain/transport/tally.js';
import { loadReferenceData } from '../../server/reference/load.js';

const seed = 1310;
const chunkPhotons = 4000;
const errorShare = 0.15; // wanted standard error over the accuracy asked of the fast solver, with a floor
const leastError = 0.0025;
const mostPhotons = 2_000_000; // per stack; an error above the wanted one widens the tolerance, in the open

const stacks: readonly [number, readonly Phototype[]][] = [
  [420, ['I', 'IV', 'VI']],
  [532, ['I', 'III', 'V']],
  [585, ['II', 'IV', 'VI']],
  [694, ['II', 'VI']],
  [755, ['I', 'III', 'V']],
  [940, ['IV']],
  [1064, ['I', 'IV', 'VI']],
  [1320, ['II']],
  [1450, ['III', 'VI']],
  [1550, ['II']],
  [1927, ['II']],
  [2200, ['V']],
];
const beams: readonly { readonly beam: BeamProfile | null; readonly target: number }[] = [
  { beam: null, target: 0.01 },
  { beam: { shape: 'circle', diameterMm: 12 }, target: 0.01 },
  { beam: { shape: 'circle', diameterMm: 6 }, target: 0.01 },
  { beam: { shape: 'square', widthMm: 8 }, target: 0.01 },
  { beam: { shape: 'circle', diameterMm: 3 }, target: 0.03 },
  { beam: { shape: 'gaussian', diameterMm: 5 }, target: 0.03 },
  { beam: { shape: 'circle', diameterMm: 1 }, target: 0.05 },
];
const depthsMm = [0, 0.03, 0.1, 0.2, 0.4, 0.8, 1.5, 3];
const leastFluence = 0.01; // of incident

function solve(question: RunQuestion) {
  const plan = planRun(question);
  let tally = emptyTally(figureCount(plan));
  for (;;) {
    tally = addChunk(tally, runChunk(plan, seed, tally.chunks, chunkPhotons));
    if (tally.chunks < 40) continue;
    if (tally.chunks * chunkPhotons >= mostPhotons) break;
    const errors = standardErrors(tally);
    const good = beams.every(({ target }, beam) =>
      depthsMm.every((_, depth) => {
        const i = beam * depthsMm.length + depth;
        return tally.means[i]! < leastFluence || errors[i]! < Math.max(leastError, errorShare * target) * tally.means[i]!;
      }),
    );
    if (good) break;
  }
  return answerRun(plan, tally, chunkPhotons);
}

const round = (value: number, digits: number) => Number(value.toPrecision(digits));
const reference = loadReferenceData(fileURLToPath(new URL('../../data', import.meta.url)));
const rows: (string | number)[][] = [
  ['id', 'quantity', 'inputs', 'expected', 'unit', 'tolerance_relative', 'tolerance_absolute', 'status', 'source'],
];
for (const [wavelengthNm, phototypes] of stacks) {
  for (const phototype of phototypes) {
    const skin = resolveSkin({ phototype }, reference.skin, new Remarks());
    const layers = skinLayers(skin, wavelengthNm, reference).map((layer) => ({
      name: layer.name,
      thicknessUm: layer.thicknessUm,
      absorptionPerCm: round(layer.absorptionPerCm, 5),
      scatteringPerCm: round(layer.scatteringPerCm, 5),
      anisotropy: round(layer.anisotropy, 4),
      refractiveIndex: round(layer.refractiveIndex, 4),
    }));
    const answer = solve({ layers, beams: beams.map(({ beam }) => beam), depthsUm: depthsMm.map((depth) => depth * 1000) });
    const compact = layers.map(({ name: _, ...figures }) => Object.values(figures));
    let worst = 0;
    beams.forEach(({ beam, target }, b) => {
      depthsMm.forEach((depthMm, d) => {
        const { value, standardError } = answer.fluenceRatios[b]![d]!;
        if (value < leastFluence) return;
        worst = Math.max(worst, standardError / value);
        rows.push([
          `${wavelengthNm}-${phototype}-${beam ? `${beam.shape}-${'widthMm' in beam ? beam.widthMm : 'diameterMm' in beam ? beam.diameterMm : 0}` : 'broad'}-${depthMm}`,
          `fluence ratio on the axis, target ${target * 100} %`,
          JSON.stringify({ layers: compact, spot: beam, depthMm, standardError: round(standardError, 2) }),
          round(value, 6),
          '1',
          target,
          round(2 * standardError, 2),
          'computed',
          `own Monte Carlo, seed ${seed}, ${answer.photons} photons`,
        ]);
      });
    });
    process.stderr.write(
      `${wavelengthNm} nm, ${phototype}: ${answer.photons} photons, worst relative error ${worst.toFixed(4)}\n`,
    );
  }
}
writeFileSync(new URL('../checks/truth/light-matrix.csv', import.meta.url), stringify(rows));
process.stderr.write(`${rows.length - 1} rows\n`);
