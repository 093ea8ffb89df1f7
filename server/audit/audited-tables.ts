/** The tables whose rows are sealed by the chain, with the columns that are hashed, in order. `row_no`, `clinic_id` and `entry_seq` stand
 *  in every one: the order of storing, the owner, and the entry that sealed the row. */
const recordColumns = ['id', 'version', 'parent_id', 'at_ms', 'recorded_at', 'content'] as const;

export const auditedTables = {
  clinic_versions: recordColumns,
  devices: recordColumns,
  meters: recordColumns,
  calibrations: recordColumns,
  checks: recordColumns,
  services: recordColumns,
  protocols: recordColumns,
  approvals: recordColumns,
  courses: recordColumns,
  exposures: [
    'id',
    'device_id',
    'external_id',
    'at_ms',
    'course_id',
    'site',
    'recorded_at',
    'content',
    'delivered_fluence_j_per_cm2',
    'low_j_per_cm2',
    'high_j_per_cm2',
    'calibration_ids',
    'model',
  ],
  corrections: recordColumns,
  alerts: ['id', 'rule', 'severity', 'device_id', 'exposure_id', 'course_id', 'at_ms', 'recorded_at', 'content'],
  acknowledgments: recordColumns,
  own_chromophores: recordColumns,
} as const satisfies Record<string, readonly string[]>;

export type AuditedTable = keyof typeof auditedTables;
export type RecordTable = {
  [T in AuditedTable]: (typeof auditedTables)[T] extends typeof recordColumns ? T : never;
}[AuditedTable];

export const auditedTableNames = Object.keys(auditedTables) as AuditedTable[];
