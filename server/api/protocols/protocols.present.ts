import type { Reader } from '../../db/reader.js';
import { approvedVersions, type ProtocolRecord, versionInForce } from './protocols.store.js';

/** Reply fields of a version, and which one is in force. */
export function presentProtocol(
  reader: Reader,
  { id, version, recordedAt, content }: ProtocolRecord,
  asOf: string | undefined,
  now: Date,
) {
  const approved = approvedVersions(reader, id, asOf) ?? [];
  const atMs = asOf === undefined ? now.getTime() : Date.parse(asOf);
  return {
    id,
    version,
    recordedAt,
    ...content,
    approved: approved.some(({ protocol }) => protocol.version === version),
    versionInForce: versionInForce(approved, atMs)?.version ?? null,
  };
}
