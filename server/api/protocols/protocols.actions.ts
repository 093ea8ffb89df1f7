import { uuidv7 } from 'uuidv7';
import type { Actor } from '../../http/actor.js';
import { RequestError } from '../../http/request-error.js';
import type { Parts } from '../../parts.js';
import {
  type ApprovalBody,
  type ApprovalRecord,
  findProtocol,
  insertApproval,
  insertProtocol,
  listApprovals,
  type ProtocolBody,
  type ProtocolRecord,
  protocolVersions,
} from './protocols.store.js';

export function addProtocol({ ledger }: Parts, actor: Actor, body: ProtocolBody): ProtocolRecord {
  const id = uuidv7();
  const change = { clinicId: actor.clinicId, actor, kind: 'protocol.proposed', subject: id };
  return ledger.change(change, (writer) => insertProtocol(writer, id, 1, { ...body, authorKey: actor.keyId }));
}

/** A new version, without force until another person approves it; the one before stays in force until then. */
export function changeProtocol(
  { ledger }: Parts,
  actor: Actor,
  id: string,
  next: (known: ProtocolRecord) => ProtocolBody,
): ProtocolRecord | null {
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'protocol.proposed', subject: id }, (writer) => {
    const known = findProtocol(writer, id);
    return known && insertProtocol(writer, id, known.version + 1, { ...next(known), authorKey: actor.keyId });
  });
}

export function approveProtocol({ ledger }: Parts, actor: Actor, protocolId: string, body: ApprovalBody): ApprovalRecord {
  const id = uuidv7();
  return ledger.change({ clinicId: actor.clinicId, actor, kind: 'protocol.approved', subject: protocolId }, (writer) => {
    const versions = protocolVersions(writer, protocolId);
    const version = body.version ?? versions[versions.length - 1]!.version;
    const approved = versions.find((candidate) => candidate.version === version);
    if (!approved) {
      const errors = [{ pointer: '/version', detail: `must be a version of the protocol, 1 to ${versions.length}` }];
      throw new RequestError('invalid-request', 'There is no such version.', errors);
    }
    if (approved.content.authorKey === actor.keyId)
      throw new RequestError(
        'conflict',
        'A protocol takes force by two people: another key than the one that wrote it must approve it.',
      );
    if (listApprovals(writer, protocolId).some(({ content }) => content.version === version))
      throw new RequestError('conflict', `Version ${version} is approved already.`);
    writer.note({ version });
    return insertApproval(writer, id, protocolId, { ...body, version, approvedByKey: actor.keyId });
  });
}
