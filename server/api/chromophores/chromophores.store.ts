import type { ReferenceData } from '../../../domain/reference/reference-data.js';
import type { Chromophore } from '../../../domain/spectra/chromophore.js';
import type { Db } from '../../db/database.js';

/** A clinic's own measured spectrum. Kept as it was measured; never changed or deleted. */
export interface OwnChromophore {
  readonly id: string;
  readonly clinicId: string;
  readonly createdAt: string;
  readonly createdBy: string;
  readonly name: string;
  readonly source: string;
  readonly measuredAt: string | null;
  readonly relativeUncertainty: number | null;
  readonly note: string;
  readonly wavelengthsNm: readonly number[];
  readonly absorptionsPerCm: readonly number[];
}

type Row = Omit<OwnChromophore, 'wavelengthsNm' | 'absorptionsPerCm'> & {
  readonly wavelengthsNm: string;
  readonly absorptionsPerCm: string;
};

const columns = `id, clinic_id AS clinicId, created_at AS createdAt, created_by AS createdBy, name, source, measured_at AS measuredAt,
  relative_uncertainty AS relativeUncertainty, note, wavelengths_nm AS wavelengthsNm, absorptions_per_cm AS absorptionsPerCm`;

const read = (row: Row): OwnChromophore => ({
  ...row,
  wavelengthsNm: JSON.parse(row.wavelengthsNm) as number[],
  absorptionsPerCm: JSON.parse(row.absorptionsPerCm) as number[],
});

export function insertOwnChromophore(db: Db, chromophore: OwnChromophore): void {
  db.prepare(
    `INSERT INTO own_chromophores (id, clinic_id, created_at, created_by, name, source, measured_at, relative_uncertainty, note,
       wavelengths_nm, absorptions_per_cm)
     VALUES (@id, @clinicId, @createdAt, @createdBy, @name, @source, @measuredAt, @relativeUncertainty, @note,
       @wavelengthsNm, @absorptionsPerCm)`,
  ).run({
    ...chromophore,
    wavelengthsNm: JSON.stringify(chromophore.wavelengthsNm),
    absorptionsPerCm: JSON.stringify(chromophore.absorptionsPerCm),
  });
}

export function findOwnChromophore(db: Db, clinicId: string | null, id: string): OwnChromophore | undefined {
  const row = db.prepare(`SELECT ${columns} FROM own_chromophores WHERE id = ? AND clinic_id = ?`).get(id, clinicId);
  return row === undefined ? undefined : read(row as Row);
}

/** A clinic's own, in the order they were made, after the first `offset`. */
export function listOwnChromophores(db: Db, clinicId: string | null, offset: number, count: number): OwnChromophore[] {
  const statement = db.prepare(`SELECT ${columns} FROM own_chromophores WHERE clinic_id = ? ORDER BY id LIMIT ? OFFSET ?`);
  return (statement.all(clinicId, count, offset) as Row[]).map(read);
}

export function countOwnChromophores(db: Db, clinicId: string | null): number {
  return db.prepare('SELECT count(*) FROM own_chromophores WHERE clinic_id = ?').pluck().get(clinicId) as number;
}

export function chromophoreOfOwn({ id, name, source, note, wavelengthsNm, absorptionsPerCm }: OwnChromophore): Chromophore {
  return {
    id,
    name,
    quantity: 'absorption coefficient, natural base',
    unit: '1/cm',
    kind: 'absorption',
    spectrum: { form: 'table', wavelengthsNm: Float64Array.from(wavelengthsNm), values: Float64Array.from(absorptionsPerCm) },
    sources: [source],
    status: 'read',
    note,
  };
}

/** Reference data in which the clinic's own spectrum of this id stands too, so that a calculation can name it; unchanged for any other id. */
export function withOwnChromophore(db: Db, reference: ReferenceData, clinicId: string | null, id: string): ReferenceData {
  if (reference.chromophores.has(id)) return reference;
  const own = findOwnChromophore(db, clinicId, id);
  if (!own) return reference;
  return { ...reference, chromophores: new Map([...reference.chromophores, [id, chromophoreOfOwn(own)]]) };
}
