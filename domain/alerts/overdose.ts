import { defineAlert, type ExposureFacts } from './alert.js';
import { protocolVerdict } from './judged-setting.js';

export type OverdoseVerdict = 'likely' | 'possible' | 'unlikely';

/** The fluence that must not be exceeded: the protocol's, or without one what was set plus the device's output tolerance. */
export function overdoseLimit(facts: ExposureFacts): {
  readonly limitJPerCm2: number;
  readonly limitFrom: 'protocol' | 'set-value';
} {
  const ofProtocol = protocolVerdict(facts)?.envelope?.fluenceMaxJPerCm2;
  if (ofProtocol !== undefined) return { limitJPerCm2: ofProtocol, limitFrom: 'protocol' };
  return { limitJPerCm2: facts.delivered.setFluenceJPerCm2 * (1 + facts.outputToleranceFraction), limitFrom: 'set-value' };
}

/** Decided on the delivered interval: likely when all of it lies above the limit, possible when some does. The panel does not count.
 *  Shape: scalar. Limits include their edges, to 1e-9 for figures computed from others. */
export function overdoseVerdict(lowJPerCm2: number, highJPerCm2: number, limitJPerCm2: number): OverdoseVerdict {
  const edge = limitJPerCm2 * (1 + 1e-9);
  return lowJPerCm2 > edge ? 'likely' : highJPerCm2 > edge ? 'possible' : 'unlikely';
}

export const overdose = defineAlert({
  id: 'overdose',
  title: 'Delivered fluence above what was allowed',
  judge(facts) {
    const { limitJPerCm2, limitFrom } = overdoseLimit(facts);
    if (limitFrom === 'set-value' && facts.response.basis === 'not-calibrated') return null; // calibration-lapsed says it
    const { lowJPerCm2, highJPerCm2, deliveredFluenceJPerCm2 } = facts.delivered;
    const verdict = overdoseVerdict(lowJPerCm2, highJPerCm2, limitJPerCm2);
    if (verdict === 'unlikely') return null;
    const figures = `${round(lowJPerCm2)} to ${round(highJPerCm2)} J/cm2 delivered against ${round(limitJPerCm2)} J/cm2`;
    return {
      severity: verdict === 'likely' ? 'high' : 'moderate',
      text: `Overdose ${verdict}: ${figures} (${limitFrom === 'protocol' ? 'limit of the protocol' : 'set value and output tolerance'}).`,
      evidence: { verdict, limitJPerCm2, limitFrom, deliveredFluenceJPerCm2, lowJPerCm2, highJPerCm2 },
    };
  },
});

const round = (value: number) => Number(value.toPrecision(3));
