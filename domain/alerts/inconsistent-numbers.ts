import { sameLineNm } from '../dosimetry/calibration.js';
import { diagnoseNumbers } from '../dosimetry/consistency.js';
import { defineAlert, lineOf } from './alert.js';

export const inconsistentNumbers = defineAlert({
  id: 'inconsistent-numbers',
  title: 'Numbers of the record that do not agree',
  judge(facts) {
    const line = lineOf(facts, sameLineNm);
    const wrong = diagnoseNumbers({
      set: facts.set,
      spot: facts.spot,
      pulseCount: facts.pulseCount,
      energyMaxJ: line?.energyMaxJ,
      fluenceMaxJPerCm2: line?.fluenceMaxJPerCm2,
    });
    if (!wrong) return null;
    return {
      severity: 'high',
      text: `The numbers do not agree: ${wrong.text}.`,
      evidence: { slip: wrong.slip, fields: wrong.fields, set: facts.set, spot: facts.spot, pulseCount: facts.pulseCount },
    };
  },
});
