/** How sure a window is, from sampling what is uncertain about the tissue. Quantiles are 5 %, 50 % and 95 %. */
export interface WindowSpread {
  readonly probabilityOfWindow: number;
  /** null where no fluence up to the greatest has the effect. */
  readonly targetThresholdQuantilesJPerCm2: (number | null)[];
  readonly epidermalLimitQuantilesJPerCm2: number[];
  /** Shares of the variance of the logarithm of limit over threshold, greatest first. */
  readonly dominantInputs: { readonly input: string; readonly varianceFraction: number }[];
}
