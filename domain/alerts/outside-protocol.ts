import { defineAlert } from './alert.js';
import { protocolVerdict } from './judged-setting.js';

export const outsideProtocol = defineAlert({
  id: 'outside-protocol',
  title: 'Settings outside the protocol',
  judge(facts) {
    if (facts.protocol === 'not-in-force') {
      return { severity: 'moderate', text: 'The protocol named had no approved version in force at that time.', evidence: {} };
    }
    const verdict = protocolVerdict(facts);
    if (!verdict || verdict.departures.length === 0 || typeof facts.protocol === 'string') return null;
    const excess = verdict.departures.some(({ parameter, bound }) => parameter === 'fluenceJPerCm2' && bound === 'max');
    const names = verdict.departures.map(({ parameter, value, limit, bound }) =>
      bound === 'list' ? `${parameter} ${value} (allowed: ${limit})` : `${parameter} ${value} (${bound} ${limit})`,
    );
    return {
      severity: excess ? 'high' : 'moderate',
      text: `Outside protocol ${facts.protocol.name}, version ${facts.protocol.version}: ${names.join('; ')}.`,
      evidence: { protocolId: facts.protocol.id, protocolVersion: facts.protocol.version, departures: verdict.departures },
    };
  },
});
