import type { DataStatus, Remarks } from '../quantities/caution.js';

/** Diameter of a melanosome taken as a sphere, between the 0.5 and 1.0 um of the long axis that is commonly stated. */
export const melanosomeDiameterUm = 0.7;

/** Temperature at which a melanosome vaporizes explosively, inferred from thresholds with Q-switched ruby pulses.
 *  @source JacquesMcAuliffe1991 abstract, from memory */
export const explosiveVaporizationC = 112;

/** Writes the two figures into the assumptions. */
export function assumeMelanosome(remarks: Remarks): void {
  const status: DataStatus = 'from-memory';
  remarks.assume({
    name: 'melanosomeDiameterUm',
    value: melanosomeDiameterUm,
    unit: 'um',
    source: 'common statement, 0.5 to 1.0 um',
    status,
  });
  remarks.assume({
    name: 'explosiveVaporizationC',
    value: explosiveVaporizationC,
    unit: 'C',
    source: 'JacquesMcAuliffe1991',
    status,
  });
}
