import { z } from 'zod';
import { queryCount } from '../../schemas/numbers.js';

export const AuditQuery = z.strictObject({
  after: queryCount(0, 999_999_999, 'Entries after this one; 0 when absent').optional(),
  limit: queryCount(1, 500, 'Entries on a page, 1 to 500; 50 when absent').optional(),
});

export const EntryItem = z
  .object({
    chain: z.string(),
    seq: z.int(),
    at: z.string(),
    actor: z.string().describe('Id of the key, or system'),
    kind: z.string(),
    subject: z.string(),
    body: z.object({
      details: z.unknown(),
      rows: z.array(z.object({ table: z.string(), count: z.int(), sha256: z.string() })).readonly(),
    }),
    prevHash: z.string(),
    hash: z.string(),
  })
  .meta({
    id: 'AuditEntry',
    description: 'One link of the chain; hash is SHA-256 over the canonical JSON (RFC 8785) of the rest',
  });

const sha256 = z.string().regex(/^[0-9a-f]{64}$/, { error: 'must be a SHA-256 in 64 lowercase hexadecimal digits' });

export const VerifyQuery = z
  .strictObject({
    checkpointSeq: queryCount(1, 999_999_999, 'Entry that a kept checkpoint names').optional(),
    checkpointHash: sha256.optional().describe('Hash that it names'),
  })
  .refine((query) => (query.checkpointSeq === undefined) === (query.checkpointHash === undefined), {
    error: 'checkpointSeq and checkpointHash go together',
    path: ['checkpointHash'],
  });

export const VerificationItem = z
  .object({
    ok: z.boolean(),
    chain: z.string(),
    entries: z.int().describe('Entries found sound'),
    rows: z.int().describe('Rows found sound'),
    head: z.object({ seq: z.int(), hash: z.string() }),
    broken: z
      .object({
        seq: z.int().describe('The first broken entry'),
        defect: z.string(),
        detail: z.string(),
        table: z.string().optional(),
        rowIndex: z.int().optional(),
        rowId: z.string().optional(),
      })
      .nullable(),
  })
  .meta({ id: 'Verification' });

export const CheckpointItem = z
  .object({
    chain: z.string(),
    seq: z.int(),
    hash: z.string(),
    at: z.string(),
    keyId: z.string(),
    signature: z.string().describe('Ed25519 over the canonical JSON of the rest, base64'),
    publicKey: z.string().describe('PEM (SPKI)'),
  })
  .meta({ id: 'Checkpoint', description: 'The signed head of the chain; keep it outside the service' });
