import { uuidv7 } from 'uuidv7';
import type { z } from 'zod';
import { Remarks } from '../../../domain/quantities/caution.js';
import { comparableAbsorptionPerCm, comparableRangeNm, heatingContrast } from '../../../domain/reference/heating-contrast.js';
import type { ReferenceData } from '../../../domain/reference/reference-data.js';
import {
  absorptionPerCm,
  type Chromophore,
  molarExtinctionPerCmPerM,
  wholeBloodHemoglobinGPerL,
} from '../../../domain/spectra/chromophore.js';
import { spectrumRangeNm } from '../../../domain/spectra/spectrum.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { skinLayers } from '../../../domain/tissue/skin-layers.js';
import { solveLight } from '../../../domain/transport/layered-solver.js';
import type { Ledger } from '../../audit/with-audit.js';
import { faultOf } from '../../http/query-faults.js';
import { type Fault, RequestError } from '../../http/request-error.js';
import { skinOf } from '../../schemas/skin-query.js';
import type { OwnChromophoreRequest, SpectrumQuery, WavelengthsQuery } from './chromophores.schema.js';
import { countOwnChromophores, insertOwnChromophore, type OwnChromophore } from './chromophores.store.js';

const steps = [1, 2, 5, 10, 20];
const usualPoints = 2000;
const mostPoints = 20_000;
const mostWavelengths = 400;
const usualSpotDiameterMm = 7;
const skinFromNm = 400;
const skinToNm = 2400;

export function findChromophore({ chromophores }: ReferenceData, id: string): Chromophore {
  const found = chromophores.get(id);
  if (!found) throw new RequestError('not-found', 'There is no such chromophore; see /v1/chromophores.');
  return found;
}

const mostOwn = 1000;

export function storeOwnChromophore(
  ledger: Ledger,
  { keyId, clinicId }: { readonly keyId: string; readonly clinicId: string },
  body: z.output<typeof OwnChromophoreRequest>,
): OwnChromophore {
  const id = uuidv7();
  return ledger.change({ clinicId, actor: { keyId }, kind: 'chromophore.stored', subject: id }, (writer) => {
    if (countOwnChromophores(writer) >= mostOwn)
      throw new RequestError('conflict', `The clinic has ${mostOwn} spectra of its own, as many as it may have.`);
    return insertOwnChromophore(writer, id, body);
  });
}

interface Range {
  readonly fromNm: number;
  readonly toNm: number;
}

function rangeWithin(asked: Partial<Range>, usual: Range, limit: Range): Range {
  const faults: Fault[] = [];
  const detail = `must lie in the spectrum, from ${limit.fromNm} to ${limit.toNm} nm; nothing is extrapolated`;
  const { fromNm = usual.fromNm, toNm = usual.toNm } = asked;
  const outside = (nm: number) => nm < limit.fromNm || nm > limit.toNm;
  if (outside(fromNm)) faults.push({ pointer: '?fromNm', detail });
  if (outside(toNm)) faults.push({ pointer: '?toNm', detail });
  if (fromNm > toNm)
    faults.push({ pointer: asked.fromNm === undefined ? '?toNm' : '?fromNm', detail: 'fromNm must not exceed toNm' });
  if (faults.length > 0) throw new RequestError('malformed', 'The wavelengths cannot be given; see errors.', faults);
  return { fromNm, toNm };
}

function gridOf({ fromNm, toNm }: Range, stepNm: number, most: number): number[] {
  const count = Math.floor((toNm - fromNm) / stepNm + 1e-9) + 1;
  if (count > most) {
    const detail = `must give at most ${most} wavelengths; it gives ${count}`;
    throw new RequestError('malformed', 'Too many wavelengths; see errors.', [{ pointer: '?stepNm', detail }]);
  }
  return Array.from({ length: count }, (_, i) => Number((fromNm + i * stepNm).toFixed(6)));
}

interface Amounts {
  readonly hemoglobinGPerL?: number | undefined;
  readonly concentrationGPerL?: number | undefined;
}

function concentrationOf({ id, kind }: Chromophore, asked: Amounts, remarks: Remarks): number | undefined {
  const isHemoglobin = id.includes('hemoglobin');
  const takes = kind === 'absorption' ? null : isHemoglobin ? 'hemoglobinGPerL' : 'concentrationGPerL';
  const faults = (['hemoglobinGPerL', 'concentrationGPerL'] as const)
    .filter((name) => name !== takes && asked[name] !== undefined)
    .map((name) => ({ pointer: `?${name}`, detail: `does not apply to ${id}` }));
  if (faults.length > 0) throw new RequestError('malformed', 'The amount does not apply; see errors.', faults);
  if (takes === null) return undefined;
  const given = asked[takes];
  if (given !== undefined) return given;
  const value = isHemoglobin ? wholeBloodHemoglobinGPerL : 1;
  const source = isHemoglobin ? 'Prahl1998' : 'round figure';
  remarks.assume({ name: takes, value, unit: 'g/L', source, status: isHemoglobin ? 'read' : 'convention' });
  return value;
}

export function readSpectrum(query: z.output<typeof SpectrumQuery>, chromophore: Chromophore) {
  const remarks = new Remarks();
  const [fromNm, toNm] = spectrumRangeNm(chromophore.spectrum);
  const range = rangeWithin(query, { fromNm, toNm }, { fromNm, toNm });
  const concentrationGPerL = concentrationOf(chromophore, query, remarks);
  const stepNm =
    query.stepNm ?? steps.find((step) => (range.toNm - range.fromNm) / step < usualPoints) ?? steps[steps.length - 1]!;
  if (query.stepNm === undefined)
    remarks.assume({ name: 'stepNm', value: stepNm, unit: 'nm', source: 'round figure', status: 'convention' });
  const wavelengthsNm = gridOf(range, stepNm, mostPoints);
  cautionAboutSpectrum(chromophore, range, remarks);
  const result = {
    wavelengthsNm,
    absorptionsPerCm: wavelengthsNm.map((nm) => absorptionPerCm(chromophore, nm, concentrationGPerL)),
    ...(chromophore.kind === 'molar-extinction'
      ? { molarExtinctionsPerCmPerM: wavelengthsNm.map((nm) => molarExtinctionPerCmPerM(chromophore, nm)) }
      : {}),
  };
  return { result, remarks, body: { id: chromophore.id, ...query } };
}

function cautionAboutSpectrum({ id, name, spread }: Chromophore, { fromNm, toNm }: Range, remarks: Remarks): void {
  if (spread && toNm >= spread.fromNm && fromNm <= spread.toNm) {
    remarks.caution(
      'sparse-spectrum',
      `${name} is known only to a factor of ${spread.factor} from ${spread.fromNm} to ${spread.toNm} nm.`,
    );
  }
  if (id.includes('hemoglobin')) {
    remarks.caution(
      'solution',
      'Hemoglobin as a solution: red cells flatten it to about half in the Soret band, and published tables differ by up to 48 % in the red.',
    );
  }
  if (id === 'melanosome') remarks.caution('melanosomes-vary', 'Melanosomes differ tenfold in how much melanin they hold.');
}

export function rankWavelengths(query: z.output<typeof WavelengthsQuery>, chromophore: Chromophore, reference: ReferenceData) {
  const remarks = new Remarks();
  const { id } = chromophore;
  const concentrationGPerL = concentrationOf(chromophore, query, remarks);
  const [from, to] = comparableRangeNm(reference, id);
  const limit = { fromNm: Math.max(from, 350), toNm: Math.min(to, 12_000) };
  const usual = { fromNm: Math.max(limit.fromNm, skinFromNm), toNm: Math.min(limit.toNm, skinToNm) };
  const range = rangeWithin(query, usual, limit);
  const diameterMm = query.spotDiameterMm ?? usualSpotDiameterMm;
  if (query.spotDiameterMm === undefined) {
    remarks.assume({ name: 'spotDiameterMm', value: diameterMm, unit: 'mm', source: 'common practice', status: 'convention' });
  }
  const lines = reference.media.filter(({ wavelengthNm }) => wavelengthNm >= range.fromNm && wavelengthNm <= range.toNm);
  const grid = gridOf(range, query.stepNm ?? 10, mostWavelengths);
  const wavelengthsNm = [...new Set([...grid, ...lines.map(({ wavelengthNm }) => wavelengthNm)])];
  const skin = resolveSkin(skinOf(query), reference.skin, remarks);
  const spot = { shape: 'circle', diameterMm } as const;
  const cylinderRadiusUm = id.includes('hemoglobin') ? skin.backgroundVesselRadiusUm : 0;
  const items = wavelengthsNm.map((wavelengthNm) => {
    const layers = faultOf('fromNm', () => skinLayers(skin, wavelengthNm, reference, remarks));
    const chromophorePerCm = comparableAbsorptionPerCm(reference, id, wavelengthNm, concentrationGPerL);
    const light = solveLight(layers, { accuracy: 'ranking' });
    const contrast = faultOf('depthMm', () =>
      heatingContrast({ chromophorePerCm, cylinderRadiusUm, layers, light, spot, depthUm: query.depthMm * 1000 }),
    );
    const media = new Set(lines.filter((line) => line.wavelengthNm === wavelengthNm).map(({ medium }) => medium));
    return {
      wavelengthNm,
      absorptionPerCm: chromophorePerCm,
      ...contrast,
      ...(media.size > 0 ? { medium: [...media].join('; ') } : {}),
    };
  });
  items.sort((a, b) => b.heatingContrast - a.heatingContrast || a.wavelengthNm - b.wavelengthNm);
  cautionAboutSpectrum(chromophore, range, remarks);
  remarks.caution(
    'short-answer',
    'Heat per volume before it flows: no pulse duration, cooling, size of the target or damage. Ask the rankings before any test.',
  );
  return { result: { items, considered: items.length, fullAnswer: 'POST /v1/rankings' }, remarks, body: { id, ...query } };
}
