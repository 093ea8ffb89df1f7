/** The emission that counts as one pulse. `durationS` is full width at half maximum of a rectangular pulse;
 *  sub-pulses share the pulse energy by `energyFraction`, which sum to 1, and do not overlap. */
export type Pulse =
  | { readonly durationS: number }
  | { readonly subPulses: readonly { readonly startS: number; readonly durationS: number; readonly energyFraction: number }[] };
