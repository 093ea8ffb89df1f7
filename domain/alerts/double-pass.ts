import { defineAlert } from './alert.js';
import { protocolVerdict } from './judged-setting.js';

/** Within this time a second pass adds to the first: the depth of injury grew with the delay up to half an hour above threshold.
 *  @source Koster2001 (double passes; abstract) */
const addsUpMs = 30 * 60_000;

export const doublePass = defineAlert({
  id: 'double-pass',
  title: 'Repeated pulses on one place',
  judge(facts) {
    const envelope = protocolVerdict(facts)?.envelope;
    if (facts.stackCount > (envelope?.stackMaxCount ?? 1)) {
      return {
        severity: 'moderate',
        text: `${facts.stackCount} pulses stacked on one place; margins for single pulses do not cover them.`,
        evidence: { stackCount: facts.stackCount, allowedCount: envelope?.stackMaxCount ?? 1 },
      };
    }
    const allowedPasses = envelope?.passMaxCount ?? 1;
    const { last } = facts;
    if (last === null || facts.atMs - last.atMs > addsUpMs) return null;
    const pass = facts.passNumber ?? 1;
    if (pass > allowedPasses && (last.passNumber ?? 1) < pass) {
      const text = `Pass ${pass} over a site that was exposed within the last 30 minutes; it adds to the first.`;
      return { severity: 'moderate', text, evidence: { passNumber: pass, allowedCount: allowedPasses } };
    }
    if (facts.pulseCount > facts.stackCount && last.isGroup && last.passNumber === facts.passNumber) {
      const text =
        'Two groups of pulses with the same pass number on one site within 30 minutes; if they cover the same skin, they add up.';
      return { severity: 'low', text, evidence: { passNumber: facts.passNumber } };
    }
    return null;
  },
});
