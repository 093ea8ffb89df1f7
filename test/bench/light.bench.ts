import type { OpticalLayer } from '../../domain/tissue/optical-layer.js';
import { solveLight } from '../../domain/transport/layered-solver.js';
import { makeLightFields } from '../../domain/transport/light-field.js';
import { type BenchRow, digits, medianMs } from './report.js';

const spots = [3, 7, 12].map((diameterMm) => ({ shape: 'circle', diameterMm }) as const);
const facesUm = Float64Array.from({ length: 101 }, (_, i) => 20_000 * (i / 100) ** 2);

// Light skin near 585 nm; each call with another absorption, so that nothing is kept from the one before.
function skin(absorptionPerCm: number): OpticalLayer[] {
  return [
    { name: 'epidermis', thicknessUm: 80, absorptionPerCm: 8, scatteringPerCm: 251, anisotropy: 0.79, refractiveIndex: 1.43 },
    { name: 'dermis', thicknessUm: 1800, absorptionPerCm, scatteringPerCm: 157, anisotropy: 0.79, refractiveIndex: 1.4 },
    { name: 'fat', thicknessUm: 20_000, absorptionPerCm: 1.5, scatteringPerCm: 74, anisotropy: 0.79, refractiveIndex: 1.44 },
  ];
}

export function benchmark(): BenchRow[] {
  let absorptionPerCm = 1;
  const wavelength = (accuracy: 'ranking' | 'fine'): void => {
    absorptionPerCm += 1e-4;
    const light = solveLight(skin(absorptionPerCm), { accuracy });
    for (const spot of spots) light.absorbedPerCm(spot, facesUm);
  };
  const start = performance.now();
  wavelength('ranking');
  const first = performance.now() - start;
  for (let i = 0; i < 200; i++) wavelength('ranking');
  const ranking = medianMs(200, () => wavelength('ranking'));
  const fine = medianMs(30, () => wavelength('fine'));
  const fields = makeLightFields(16);
  const kept = medianMs(200, () => {
    const light = fields.solve(skin(1), { accuracy: 'ranking' });
    for (const spot of spots) light.absorbedPerCm(spot, facesUm);
  });
  const note = 'three layers of differing index, 3 spots, 100 cells';
  return [
    {
      what: 'light, one wavelength, ranking setting',
      figure: `${digits(ranking)} ms`,
      note: `${note}; first call ${digits(first)} ms`,
    },
    { what: 'light, one wavelength, fine setting', figure: `${digits(fine)} ms`, note },
    {
      what: 'light, one wavelength kept by its optics',
      figure: `${digits(kept)} ms`,
      note: `${digits(ranking / kept)} times faster than solved anew`,
    },
  ];
}
