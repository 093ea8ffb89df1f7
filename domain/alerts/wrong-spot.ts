import { isSameSpot, sameLineNm } from '../dosimetry/calibration.js';
import { defineAlert, lineOf } from './alert.js';
import { spotText } from './protocol-envelope.js';

export const wrongSpot = defineAlert({
  id: 'wrong-spot',
  title: 'Spot or handpiece that the device does not have',
  judge(facts) {
    const handpiece = facts.handpieces.find(({ name }) => name === facts.handpiece);
    if (facts.handpiece !== null && facts.handpieces.length > 0 && !handpiece) {
      const names = facts.handpieces.map(({ name }) => name);
      const text = `Handpiece ${facts.handpiece} recorded; the device has ${names.join(', ')}.`;
      return { severity: 'moderate', text, evidence: { handpiece: facts.handpiece, handpieces: names } };
    }
    const spots = handpiece?.spots ?? lineOf(facts, sameLineNm)?.spots;
    if (!spots || spots.length === 0 || spots.some((spot) => isSameSpot(spot, facts.spot))) return null;
    const offered = spots.map(spotText);
    const where = handpiece?.spots ? `handpiece ${handpiece.name}` : 'the device at this wavelength';
    return {
      severity: 'high',
      text: `${spotText(facts.spot)} recorded; ${where} has ${offered.join(', ')}.`,
      evidence: { spot: facts.spot, offeredSpots: spots },
    };
  },
});
