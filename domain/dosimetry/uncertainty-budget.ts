/** One quantity's part in the uncertainty of a product of powers. */
export interface BudgetEntry {
  readonly quantity: string;
  /** Standard uncertainty of the quantity over its value, k = 1. */
  readonly relativeStandard: number;
  /** Power with which the quantity enters. */
  readonly sensitivity: number;
  /** Sensitivity times relative standard uncertainty. */
  readonly contribution: number;
}

export interface UncertaintyBudget {
  readonly relativeStandard: number;
  readonly budget: readonly BudgetEntry[];
}

/** First-order uncertainty of a product of uncorrelated powers: the root of the sum of squared contributions.
 *  @source JCGM100 eq. 10 and 12 */
export function combineRelative(inputs: readonly Omit<BudgetEntry, 'contribution'>[]): UncertaintyBudget {
  const budget: BudgetEntry[] = [];
  let variance = 0;
  for (const { quantity, relativeStandard, sensitivity } of inputs) {
    const contribution = Math.abs(sensitivity) * relativeStandard;
    variance += contribution * contribution;
    budget.push({ quantity, relativeStandard, sensitivity, contribution });
  }
  return { relativeStandard: Math.sqrt(variance), budget };
}
