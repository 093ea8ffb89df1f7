import type { z } from 'zod';
import { Remarks } from '../../../domain/quantities/caution.js';
import { withHemoglobinTable } from '../../../domain/reference/choose-hemoglobin.js';
import type { ReferenceData } from '../../../domain/reference/reference-data.js';
import { bloodSpreadFactor } from '../../../domain/spectra/blood.js';
import { resolveSkin } from '../../../domain/tissue/skin.js';
import { skinLayers } from '../../../domain/tissue/skin-layers.js';
import { faultOf } from '../../http/query-faults.js';
import { skinOf } from '../../schemas/skin-query.js';
import type { TissueOpticsQuery } from './tissue-optics.schema.js';

const notableSpread = 1.2;

export function describeOptics(query: z.output<typeof TissueOpticsQuery>, data: ReferenceData) {
  const { wavelengthNm, hemoglobinTable = 'prahl1998' } = query;
  const remarks = new Remarks();
  const reference = withHemoglobinTable(data, hemoglobinTable);
  const skin = resolveSkin(skinOf(query), reference.skin, remarks);
  if (query.hemoglobinTable === undefined) {
    remarks.assume({ name: 'hemoglobinTable', value: hemoglobinTable, source: 'Prahl1998', status: 'read-secondary' });
  }
  const layers = faultOf('wavelengthNm', () => skinLayers(skin, wavelengthNm, reference, remarks));
  const spread = bloodSpreadFactor(wavelengthNm, skin, reference);
  if (spread >= notableSpread) {
    remarks.caution(
      'blood-tables-differ',
      `Published absorptions of blood differ by a factor of ${spread.toPrecision(3)} at this wavelength.`,
    );
  }
  const { melanosomeFraction, melanosomeFractionLow, melanosomeFractionHigh, itaDegrees } = skin;
  const pigment = { melanosomeFraction, melanosomeFractionLow, melanosomeFractionHigh, itaDegrees };
  return { result: { wavelengthNm, ...pigment, bloodSpreadFactor: spread, layers }, remarks, body: query };
}
