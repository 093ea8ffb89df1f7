import { createPrivateKey, createPublicKey, generateKeyPairSync, sign, verify } from 'node:crypto';
import { canonicalJson, sha256Hex } from '../codecs/canonical-json.js';
import type { Db } from '../db/database.js';
import { prepared } from '../db/prepared.js';
import { immediately } from '../db/transaction.js';
import { chainOf, headOf } from './audit.store.js';

/** The head of a chain at a time, signed with Ed25519 over the canonical JSON of the rest. Kept elsewhere, it shows a cut-off tail. */
export interface Checkpoint {
  readonly chain: string;
  readonly seq: number;
  readonly hash: string;
  readonly at: string;
  readonly keyId: string;
  /** Base64. */
  readonly signature: string;
}

export interface SigningKey {
  readonly id: string;
  readonly publicPem: string;
}

function signedText({ chain, seq, hash, at, keyId }: Omit<Checkpoint, 'signature'>): Buffer {
  return Buffer.from(canonicalJson({ chain, seq, hash, at, keyId }));
}

export function verifyCheckpoint(checkpoint: Checkpoint, publicPem: string): boolean {
  try {
    return verify(null, signedText(checkpoint), createPublicKey(publicPem), Buffer.from(checkpoint.signature, 'base64'));
  } catch {
    return false; // no key, or not an Ed25519 signature
  }
}

export function storedKeys(db: Db): SigningKey[] {
  return prepared(db, 'SELECT id, public_pem AS publicPem FROM signing_keys ORDER BY created_at, id').all() as SigningKey[];
}

export function storedCheckpoints(db: Db, chain: string, after = 0, count = -1): Checkpoint[] {
  const sql = `SELECT chain, seq, hash, at, key_id AS keyId, signature FROM audit_checkpoints WHERE chain = ? AND seq > ? ORDER BY seq LIMIT ?`;
  return prepared(db, sql).all(chain, after, count) as Checkpoint[];
}

/** Signs the present head and keeps the checkpoint; null while the chain is empty. The key is made at first need. */
export function makeCheckpoint(db: Db, clinicId: string | null, now: () => Date): Checkpoint | null {
  return immediately(db, () => {
    const chain = chainOf(clinicId);
    const head = headOf(db, chain);
    if (head.seq === 0) return null;
    const known = storedCheckpoints(db, chain, head.seq - 1, 1)[0];
    if (known) return known;
    const key = signingKey(db, now);
    const open = { chain, seq: head.seq, hash: head.hash, at: now().toISOString(), keyId: key.id };
    const signature = sign(null, signedText(open), createPrivateKey(key.privatePem)).toString('base64');
    const sql = 'INSERT INTO audit_checkpoints (chain, seq, hash, at, key_id, signature) VALUES (?, ?, ?, ?, ?, ?)';
    prepared(db, sql).run(open.chain, open.seq, open.hash, open.at, open.keyId, signature);
    return { ...open, signature };
  });
}

function signingKey(db: Db, now: () => Date): { id: string; privatePem: string } {
  const sql = 'SELECT id, private_pem AS privatePem FROM signing_keys ORDER BY created_at DESC, id DESC LIMIT 1';
  const known = prepared(db, sql).get() as { id: string; privatePem: string } | undefined;
  if (known) return known;
  const pair = generateKeyPairSync('ed25519');
  const publicPem = pair.publicKey.export({ type: 'spki', format: 'pem' }).toString();
  const privatePem = pair.privateKey.export({ type: 'pkcs8', format: 'pem' }).toString();
  const id = sha256Hex(publicPem).slice(0, 16);
  const insert = 'INSERT INTO signing_keys (id, public_pem, private_pem, created_at) VALUES (?, ?, ?, ?)';
  prepared(db, insert).run(id, publicPem, privatePem, now().toISOString());
  return { id, privatePem };
}
