import { type HemoglobinTableId, hemoglobinTables } from '../spectra/blood.js';
import type { ReferenceData } from './reference-data.js';

/** The same reference data with the other hemoglobin table in force wherever blood is computed; the second table reaches from 450 to
 *  1000 nm. @source Prahl1998; Zijlstra1991 */
export function withHemoglobinTable(reference: ReferenceData, table: HemoglobinTableId): ReferenceData {
  const hemoglobin = hemoglobinTables[table];
  const chromophores = new Map([...reference.chromophores, ...reference.alternatives]);
  return { ...reference, hemoglobin, chromophores };
}
