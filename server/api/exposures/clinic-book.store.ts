import type { ProtocolInForce } from '../../../domain/alerts/protocol-envelope.js';
import type { Db } from '../../db/database.js';
import { prepared } from '../../db/prepared.js';
import type { Reader } from '../../db/reader.js';
import { type DeviceFile, openDeviceFile } from '../devices/device-file.store.js';
import { type ApprovedVersion, approvedVersions, versionInForce } from '../protocols/protocols.store.js';

/** Devices and protocols of a clinic as known at a time, read once each. */
export class ClinicBook {
  readonly #devices = new Map<string, DeviceFile | null>();
  readonly #protocols = new Map<string, ApprovedVersion[] | null>();

  constructor(
    readonly reader: Reader,
    readonly asOf?: string | undefined,
  ) {}

  device(id: string): DeviceFile | null {
    let file = this.#devices.get(id);
    if (file === undefined) {
      file = openDeviceFile(this.reader, id, this.asOf);
      this.#devices.set(id, file);
    }
    return file;
  }

  /** Null: there is no such protocol. */
  protocol(id: string, atMs: number): ProtocolInForce | 'not-in-force' | null {
    let versions = this.#protocols.get(id);
    if (versions === undefined) {
      versions = approvedVersions(this.reader, id, this.asOf);
      this.#protocols.set(id, versions);
    }
    return versions && (versionInForce(versions, atMs) ?? 'not-in-force');
  }
}

const present = new WeakMap<Db, Map<string | null, { readonly stamp: string; readonly book: ClinicBook }>>();

/** What is known now, kept until a device, calibration, service, protocol or approval is added by anyone. Not for use inside a change
 *  that adds one. */
export function presentBook({ db, clinicId }: Reader): ClinicBook {
  const tables = ['devices', 'calibrations', 'services', 'protocols', 'approvals'];
  const sql = `SELECT ${tables.map((table) => `coalesce((SELECT max(row_no) FROM ${table}), 0)`).join(" || ' ' || ")}`;
  const stamp = prepared(db, sql).pluck().get() as string;
  let books = present.get(db);
  if (!books) {
    books = new Map();
    present.set(db, books);
  }
  const known = books.get(clinicId);
  if (known?.stamp === stamp) return known.book;
  const book = new ClinicBook({ db, clinicId });
  books.set(clinicId, { stamp, book });
  return book;
}
