import type { App } from '../../http/app-type.js';
import { registerChildRoutes } from '../../http/child-routes.js';
import { registerVersionedRoutes } from '../../http/versioned-routes.js';
import type { Parts } from '../../parts.js';
import { addProtocol, approveProtocol, changeProtocol } from './protocols.actions.js';
import { presentProtocol } from './protocols.present.js';
import { ApprovalItem, ApprovalRequest, ProtocolItem, ProtocolRequest } from './protocols.schema.js';
import {
  type ApprovalBody,
  type ApprovalRecord,
  findApproval,
  findProtocol,
  listApprovals,
  listProtocols,
  type ProtocolBody,
  type ProtocolRecord,
} from './protocols.store.js';

export function registerProtocolsRoutes(app: App, parts: Parts): void {
  const { ledger, now } = parts;
  registerVersionedRoutes<ProtocolBody, ProtocolRecord>(app, {
    path: '/v1/protocols',
    tag: 'protocols',
    noun: 'protocol',
    body: ProtocolRequest,
    item: ProtocolItem,
    writeRole: 'physicist',
    list: ({ clinicId }, options) => listProtocols(ledger.reader(clinicId), options),
    find: ({ clinicId }, id, asOf) => findProtocol(ledger.reader(clinicId), id, asOf),
    create: (actor, body) => addProtocol(parts, actor, body),
    change: (actor, id, next) => changeProtocol(parts, actor, id, next),
    bodyOf: ({ content: { authorKey, ...body } }) => body,
    present: (kept, { clinicId }, asOf) => presentProtocol(ledger.reader(clinicId), kept, asOf, now()),
  });
  registerChildRoutes<ApprovalBody, ApprovalRecord>(app, {
    parentPath: '/v1/protocols',
    name: 'approvals',
    parentNoun: 'protocol',
    noun: 'approval',
    body: ApprovalRequest,
    item: ApprovalItem,
    writeRole: 'physicist',
    parentExists: ({ clinicId }, protocolId) => findProtocol(ledger.reader(clinicId), protocolId) !== null,
    list: ({ clinicId }, protocolId, options) => listApprovals(ledger.reader(clinicId), protocolId, options),
    find: ({ clinicId }, id, asOf) => findApproval(ledger.reader(clinicId), id, asOf),
    create: (actor, protocolId, body) => approveProtocol(parts, actor, protocolId, body),
    present: (_actor, protocolId, kept) =>
      kept.map(({ id, recordedAt, content }) => ({ id, protocolId, recordedAt, ...content })),
  });
}
