import { sameLineNm } from '../dosimetry/calibration.js';
import { defineAlert, lineOf } from './alert.js';

export const wrongWavelength = defineAlert({
  id: 'wrong-wavelength',
  title: 'Wavelength that the device does not emit',
  judge(facts) {
    if (lineOf(facts, sameLineNm)) return null;
    const emittedNm = facts.lines.map((line) => line.wavelengthNm);
    return {
      severity: 'high',
      text: `${facts.wavelengthNm} nm recorded; the device emits ${emittedNm.join(', ')} nm.`,
      evidence: { wavelengthNm: facts.wavelengthNm, emittedWavelengthsNm: emittedNm },
    };
  },
});
