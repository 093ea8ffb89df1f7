import type { ExposureFacts } from './alert.js';
import { type Departure, type Envelope, type JudgedSetting, judgeSetting } from './protocol-envelope.js';

/** The setting of an exposure as protocols see it. */
export function settingOf(facts: ExposureFacts): JudgedSetting {
  return { ...facts, setFluenceJPerCm2: facts.delivered.setFluenceJPerCm2 };
}

/** Verdict of the protocol in force; null without one. */
export function protocolVerdict(
  facts: ExposureFacts,
): { readonly envelope: Envelope | null; readonly departures: readonly Departure[] } | null {
  return typeof facts.protocol === 'string' ? null : judgeSetting(facts.protocol.envelopes, settingOf(facts));
}
