// Recomputes test/checks/truth/light-matrix.csv by Monte Carlo: npx tsx test/support/make-light-matrix.ts [stack ...]
// With names of stacks, such as 585-II, only those.
import { readFileSync, writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { parse } from 'csv-parse/sync';
import { stringify } from 'csv-stringify/sync';
import { Remarks } from '../../domain/quantities/caution.js';
import type { OpticalLayer } from '../../domain/tissue/optical-layer.js';
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

const usualDepthsMm = [0, 0.03, 0.1, 0.2, 0.4, 0.8, 1.5, 3];
const skins: readonly {
  readonly nm: number;
  readonly phototypes: readonly Phototype[];
  readonly depthsMm?: readonly number[];
}[] = [
  { nm: 420, phototypes: ['I', 'IV', 'VI'] },
  { nm: 532, phototypes: ['I', 'III', 'V'] },
  { nm: 585, phototypes: ['II', 'IV', 'VI'] },
  { nm: 694, phototypes: ['II', 'VI'] },
  { nm: 755, phototypes: ['I', 'III', 'V'] },
  { nm: 940, phototypes: ['IV'] },
  { nm: 1064, phototypes: ['I', 'IV', 'VI'] },
  { nm: 1320, phototypes: ['II'] },
  { nm: 1450, phototypes: ['III', 'VI'] },
  { nm: 1550, phototypes: ['II'] },
  { nm: 1927, phototypes: ['II'] },
  { nm: 2200, phototypes: ['V'] },
  { nm: 2940, phototypes: ['II'], depthsMm: [0, 0.0003, 0.001, 0.002] },
  { nm: 10_600, phototypes: ['II'], depthsMm: [0, 0.003, 0.01, 0.03] },
];
// Ultraviolet has no skin model here; a stack of its size, chosen for this check.
const ultraviolet = [
  { name: 'epidermis', thicknessUm: 80, absorptionPerCm: 60, scatteringPerCm: 500, anisotropy: 0.7, refractiveIndex: 1.45 },
  { name: 'dermis', thicknessUm: 2000, absorptionPerCm: 15, scatteringPerCm: 400, anisotropy: 0.7, refractiveIndex: 1.39 },
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
const fluxTarget = 0.005; // accuracy asked of reflected and absorbed light
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
      question.depthsUm.every((_, depth) => {
        const i = beam * question.depthsUm.length + depth;
        return tally.means[i]! < leastFluence || errors[i]! < Math.max(leastError, errorShare * target) * tally.means[i]!;
      }),
    );
    if (good) break;
  }
  return answerRun(plan, tally, chunkPhotons);
}

const round = (value: number, digits: number) => Number(value.toPrecision(digits));
const truthFile = new URL('../checks/truth/light-matrix.csv', import.meta.url);
const wanted = process.argv.slice(2);
const kept: string[][] = wanted.length > 0 ? parse(readFileSync(truthFile, 'utf8')) : [];
const reference = loadReferenceData(fileURLToPath(new URL('../../data', import.meta.url)));
const rows: (string | number)[][] = [
  ['id', 'quantity', 'inputs', 'expected', 'unit', 'tolerance_relative', 'tolerance_absolute', 'status', 'source'],
];

function beamName(beam: BeamProfile | null): string {
  if (beam === null) return 'broad';
  return `${beam.shape}-${'diameterMm' in beam ? beam.diameterMm : 'widthMm' in beam ? beam.widthMm : ''}`;
}

function addStack(name: string, layers: readonly OpticalLayer[], depthsMm: readonly number[]): void {
  if (wanted.length > 0 && !wanted.includes(name)) {
    rows.push(...kept.filter(([id]) => id!.startsWith(`${name}-`)));
    return;
  }
  const rounded = layers.map((layer) => ({
    name: layer.name,
    thicknessUm: layer.thicknessUm,
    absorptionPerCm: round(layer.absorptionPerCm, 5),
    scatteringPerCm: round(layer.scatteringPerCm, 5),
    anisotropy: round(layer.anisotropy, 4),
    refractiveIndex: round(layer.refractiveIndex, 4),
  }));
  const answer = solve({
    layers: rounded,
    beams: beams.map(({ beam }) => beam),
    depthsUm: depthsMm.map((depth) => depth * 1000),
  });
  const compact = rounded.map(({ name: _, ...figures }) => Object.values(figures));
  const source = `own Monte Carlo, seed ${seed}, ${answer.photons} photons`;
  for (const [quantity, { value, standardError }] of [
    ['diffuse reflectance', answer.diffuseReflectance],
    ['absorbed fraction', answer.absorbedFraction],
  ] as const) {
    const inputs = JSON.stringify({ layers: compact, spot: null, depthMm: 0, standardError: round(standardError, 2) });
    rows.push([
      `${name}-${quantity}`,
      quantity,
      inputs,
      round(value, 6),
      '1',
      fluxTarget,
      round(2 * standardError, 2),
      'computed',
      source,
    ]);
  }
  let worst = 0;
  beams.forEach(({ beam, target }, b) => {
    depthsMm.forEach((depthMm, d) => {
      const { value, standardError } = answer.fluenceRatios[b]![d]!;
      if (value < leastFluence) return;
      worst = Math.max(worst, standardError / value);
      rows.push([
        `${name}-${beamName(beam)}-${depthMm}`,
        `fluence ratio on the axis, target ${target * 100} %`,
        JSON.stringify({ layers: compact, spot: beam, depthMm, standardError: round(standardError, 2) }),
        round(value, 6),
        '1',
        target,
        round(2 * standardError, 2),
        'computed',
        source,
      ]);
    });
  });
  process.stderr.write(`${name}: ${answer.photons} photons, worst relative error ${worst.toFixed(4)}\n`);
}

for (const { nm, phototypes, depthsMm } of skins) {
  for (const phototype of phototypes) {
    const skin = resolveSkin({ phototype }, reference.skin, new Remarks());
    addStack(`${nm}-${phototype}`, skinLayers(skin, nm, reference), depthsMm ?? usualDepthsMm);
  }
}
addStack('308-explicit', ultraviolet, [0, 0.01, 0.03, 0.08, 0.15, 0.3]);
writeFileSync(truthFile, stringify(rows));
process.stderr.write(`${rows.length - 1} rows\n`);
