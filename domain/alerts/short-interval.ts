import { defineAlert } from './alert.js';
import { protocolVerdict } from './judged-setting.js';

/** Exposures of one site within this time are one visit. Common practice, no source. */
export const visitHours = 12;
/** Least days between visits when the protocol says nothing: weekly visits gave mottled hypopigmentation in 3 of 22.
 *  @source Wattanakrai2010 (weekly low-fluence 1064 nm; as summarized elsewhere) */
const usualIntervalDays = 8;
const msPerHour = 3_600_000;
const msPerDay = 24 * msPerHour;

export const shortInterval = defineAlert({
  id: 'short-interval',
  title: 'Too short an interval since the last visit of this site',
  judge(facts) {
    const sinceMs = facts.last === null ? 0 : facts.atMs - facts.last.atMs;
    if (sinceMs <= visitHours * msPerHour) return null; // none before, or the same visit: said at its first exposure
    const days = sinceMs / msPerDay;
    const ofProtocol = protocolVerdict(facts)?.envelope?.intervalMinDays;
    const leastDays = ofProtocol ?? usualIntervalDays;
    if (days >= leastDays - visitHours / 24) return null;
    return {
      severity: 'moderate',
      text: `${days.toFixed(1)} days since the last visit of this site; at least ${leastDays} are kept${ofProtocol === undefined ? ' by default' : ' by the protocol'}.`,
      evidence: {
        intervalDays: days,
        leastIntervalDays: leastDays,
        limitFrom: ofProtocol === undefined ? 'default' : 'protocol',
      },
    };
  },
});
