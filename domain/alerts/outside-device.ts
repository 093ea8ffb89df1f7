import { sameLineNm } from '../dosimetry/calibration.js';
import { defineAlert, lineOf } from './alert.js';

export const outsideDevice = defineAlert({
  id: 'outside-device',
  title: 'Settings that the panel of the device does not offer',
  judge(facts) {
    const line = lineOf(facts, sameLineNm);
    if (!line) return null; // wrong-wavelength says it
    const { pulseDurationS, repetitionRateHz } = facts;
    const edge = 1e-9; // relative; figures computed from others
    const out: { parameter: string; value: number; limit: number }[] = [];
    if (pulseDurationS < line.pulseMinS * (1 - edge))
      out.push({ parameter: 'pulseDurationS', value: pulseDurationS, limit: line.pulseMinS });
    if (pulseDurationS > line.pulseMaxS * (1 + edge))
      out.push({ parameter: 'pulseDurationS', value: pulseDurationS, limit: line.pulseMaxS });
    if (repetitionRateHz !== null && repetitionRateHz > line.repetitionMaxHz * (1 + edge))
      out.push({ parameter: 'repetitionRateHz', value: repetitionRateHz, limit: line.repetitionMaxHz });
    const { pulseEnergyJ } = facts.set;
    if (pulseEnergyJ !== undefined && line.energyMaxJ !== undefined && pulseEnergyJ > line.energyMaxJ * (1 + edge))
      out.push({ parameter: 'pulseEnergyJ', value: pulseEnergyJ, limit: line.energyMaxJ });
    const fluence = facts.delivered.setFluenceJPerCm2;
    if (line.fluenceMaxJPerCm2 !== undefined && fluence > line.fluenceMaxJPerCm2 * (1 + edge))
      out.push({ parameter: 'fluenceJPerCm2', value: fluence, limit: line.fluenceMaxJPerCm2 });
    if (out.length === 0) return null;
    const text = `The panel cannot be set so: ${out.map(({ parameter, value, limit }) => `${parameter} ${value} (limit ${limit})`).join('; ')}.`;
    return { severity: 'moderate', text, evidence: { departures: out } };
  },
});
