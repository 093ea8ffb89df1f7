import type { z } from 'zod';
import type { ProtocolInForce } from '../../../domain/alerts/protocol-envelope.js';
import {
  type ChildOptions,
  findRecord,
  findVersions,
  insertRecord,
  listOfParent,
  listRecords,
  type StoredRecord,
} from '../../audit/records.js';
import type { Writer } from '../../audit/with-audit.js';
import type { Reader } from '../../db/reader.js';
import type { ApprovalRequest, ProtocolRequest } from './protocols.schema.js';

export type ProtocolBody = z.output<typeof ProtocolRequest>;
/** With the key that wrote the version: another one has to approve it. */
export type ProtocolContent = ProtocolBody & { readonly authorKey: string };
export type ProtocolRecord = StoredRecord<ProtocolContent>;

export type ApprovalBody = z.output<typeof ApprovalRequest>;
export type ApprovalContent = ApprovalBody & { readonly version: number; readonly approvedByKey: string };
export type ApprovalRecord = StoredRecord<ApprovalContent>;

export const insertProtocol = (writer: Writer, id: string, version: number, content: ProtocolContent): ProtocolRecord =>
  insertRecord(writer, 'protocols', { id, version, content });

export const findProtocol = (reader: Reader, id: string, asOf?: string) =>
  findRecord<ProtocolContent>(reader, 'protocols', id, asOf);

export const protocolVersions = (reader: Reader, id: string, asOf?: string) =>
  findVersions<ProtocolContent>(reader, 'protocols', id, asOf);

export const listProtocols = (reader: Reader, options: { after?: string; count: number; asOf?: string | undefined }) =>
  listRecords<ProtocolContent>(reader, 'protocols', options);

export const insertApproval = (writer: Writer, id: string, protocolId: string, content: ApprovalContent): ApprovalRecord =>
  insertRecord(writer, 'approvals', { id, parentId: protocolId, atMs: Date.parse(writer.at), content });

export const findApproval = (reader: Reader, id: string, asOf?: string) =>
  findRecord<ApprovalContent>(reader, 'approvals', id, asOf);

export const listApprovals = (reader: Reader, protocolId: string, options?: ChildOptions) =>
  listOfParent<ApprovalContent>(reader, 'approvals', protocolId, options);

/** A version with its time of force. */
export interface ApprovedVersion {
  readonly protocol: ProtocolInForce;
  readonly fromMs: number;
  readonly untilMs: number;
}

/** Approved versions of a protocol, the newest first. Null when there is no such protocol. */
export function approvedVersions(reader: Reader, id: string, asOf?: string): ApprovedVersion[] | null {
  const versions = protocolVersions(reader, id, asOf);
  if (versions.length === 0) return null;
  const approvedAt = new Map(listApprovals(reader, id, { asOf }).map(({ recordedAt, content }) => [content.version, recordedAt]));
  return versions
    .flatMap(({ version, content }) => {
      const approved = approvedAt.get(version);
      if (approved === undefined) return [];
      const { name, envelopes, effectiveFrom = approved, effectiveUntil } = content;
      const untilMs = effectiveUntil === undefined ? Number.POSITIVE_INFINITY : Date.parse(effectiveUntil);
      return [{ protocol: { id, name, version, envelopes }, fromMs: Date.parse(effectiveFrom), untilMs }];
    })
    .reverse();
}

/** The version that was in force at a time. */
export function versionInForce(versions: readonly ApprovedVersion[], atMs: number): ProtocolInForce | null {
  return versions.find(({ fromMs, untilMs }) => fromMs <= atMs && atMs < untilMs)?.protocol ?? null;
}
