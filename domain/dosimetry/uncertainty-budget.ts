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
  const budget = inputs.map((entry) => ({ ...entry, contribution: Math.abs(entry.sensitivity) * entry.relativeStandard }));
  return { relativeStandard: Math.sqrt(budget.reduce((sum, { contribution }) => sum + contribution ** 2, 0)), budget };
}
