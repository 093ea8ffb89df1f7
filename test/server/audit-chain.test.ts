import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Database from 'better-sqlite3';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import { makeCheckpoint, storedKeys, verifyCheckpoint } from '../../server/audit/checkpoint.js';
import { findRecord, findVersions, insertRecord, listOfParent, listRecords } from '../../server/audit/records.js';
import { verifyChain } from '../../server/audit/verify.js';
import { openLedger } from '../../server/audit/with-audit.js';
import { type Db, openDatabase } from '../../server/db/database.js';

const folder = mkdtempSync(join(tmpdir(), 'audit-chain-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

let db: Db;
let file: string;
let count = 0;
let clock = Date.parse('2026-01-01T00:00:00Z');
const now = () => new Date(clock);
const actor = { keyId: 'key-1' };

beforeEach(() => {
  file = join(folder, `${count++}.sqlite`);
  db = openDatabase(file, now);
  db.prepare(
    "INSERT INTO clinics (id, name, created_at) VALUES ('north', 'North', '2026-01-01'), ('south', 'South', '2026-01-01')",
  ).run();
  const ledger = openLedger(db, now);
  for (let i = 0; i < 5; i++) {
    clock += 1000;
    for (const clinicId of ['north', 'south']) {
      ledger.change({ clinicId, actor, kind: 'course.opened', subject: `c${i}` }, (writer) => {
        for (let j = 0; j < 3; j++)
          insertRecord(writer, 'courses', { id: `${clinicId}-${i}-${j}`, content: { number: i * 3 + j, site: 'cheek' } });
      });
    }
  }
});

/** Changes the file behind the program's back: without its triggers. */
function tamper(sql: string, ...given: unknown[]): void {
  const raw = new Database(file);
  for (const { name } of raw.prepare("SELECT name FROM sqlite_master WHERE type = 'trigger'").all() as { name: string }[])
    raw.exec(`DROP TRIGGER ${name}`);
  raw.prepare(sql).run(...given);
  raw.close();
}

describe('a sound chain', () => {
  it('verifies with every row it seals, clinic by clinic', async () => {
    const found = await verifyChain(db, 'north');
    expect(found).toMatchObject({ ok: true, entries: 5, rows: 15, broken: null });
    expect(found.head.hash).toMatch(/^[0-9a-f]{64}$/);
    expect((await verifyChain(db, null)).entries).toBe(0);
  });

  it('leaves no entry and no row when a change fails', () => {
    const ledger = openLedger(db, now);
    const fail = () =>
      ledger.change({ clinicId: 'north', actor, kind: 'course.opened', subject: 'x' }, (writer) => {
        insertRecord(writer, 'courses', { id: 'half', content: {} });
        throw new Error('stop');
      });
    expect(fail).toThrow('stop');
    expect(findRecord(ledger.reader('north'), 'courses', 'half')).toBeNull();
  });

  it('refuses a writer that outlives its change', () => {
    const ledger = openLedger(db, now);
    const writer = ledger.change({ clinicId: 'north', actor, kind: 'x', subject: 'x' }, (open) => open);
    expect(() => writer.insert('courses', ['a', 1, null, null, 'now', '{}'])).toThrow('over');
  });

  it.each(['courses', 'audit_entries'])('refuses to change or delete rows of %s', (table) => {
    expect(() => db.prepare(`DELETE FROM ${table}`).run()).toThrow('append-only');
    expect(() => db.prepare(`UPDATE ${table} SET row_no = row_no + 1`).run()).toThrow();
  });
});

describe('tampering', () => {
  const content = '{"number":7,"site":"chin"}';

  it('an edited row is named, with its entry', async () => {
    tamper('UPDATE courses SET content = ? WHERE id = ?', content, 'north-2-1');
    expect((await verifyChain(db, 'north')).broken).toMatchObject({
      seq: 3,
      defect: 'wrong-rows',
      table: 'courses',
      rowId: 'north-2-1',
    });
    expect((await verifyChain(db, 'south')).ok).toBe(true);
  });

  it('a deleted row is found', async () => {
    tamper('DELETE FROM courses WHERE id = ?', 'north-1-0');
    expect((await verifyChain(db, 'north')).broken).toMatchObject({ seq: 2, defect: 'missing-rows', rowIndex: 0 });
  });

  it('an added row is found', async () => {
    tamper(
      "INSERT INTO courses (clinic_id, entry_seq, id, version, recorded_at, content) VALUES ('north', 5, 'extra', 1, '2026', '{}')",
    );
    expect((await verifyChain(db, 'north')).broken).toMatchObject({ seq: 5, defect: 'unsealed-rows' });
  });

  it.each(['at', 'actor', 'kind', 'subject', 'prev_hash', 'hash'])('an edited %s of an entry is found', async (column) => {
    tamper(`UPDATE audit_entries SET ${column} = 'x' || substr(${column}, 2) WHERE chain = 'north' AND seq = 4`);
    const { broken } = await verifyChain(db, 'north');
    expect(broken?.seq).toBe(4);
    expect(['wrong-hash', 'broken-link']).toContain(broken?.defect);
  });

  it('an entry deleted from the middle is found', async () => {
    tamper("DELETE FROM audit_entries WHERE chain = 'north' AND seq = 2");
    expect((await verifyChain(db, 'north')).broken).toMatchObject({ seq: 2, defect: 'wrong-sequence' });
  });

  it('a last entry cut off with its rows and head is found against a kept checkpoint, and only so', async () => {
    const kept = makeCheckpoint(db, 'north', now)!;
    tamper("DELETE FROM audit_checkpoints WHERE chain = 'north'");
    tamper("DELETE FROM audit_entries WHERE chain = 'north' AND seq = 5");
    tamper("DELETE FROM courses WHERE clinic_id = 'north' AND entry_seq = 5");
    tamper(
      "UPDATE audit_heads SET seq = 4, hash = (SELECT hash FROM audit_entries WHERE chain = 'north' AND seq = 4) WHERE chain = 'north'",
    );
    expect((await verifyChain(db, 'north')).ok).toBe(true);
    expect((await verifyChain(db, 'north', [kept])).broken).toMatchObject({ seq: 5, defect: 'checkpoint-differs' });
  });

  it('a last entry cut off alone is found by its head and its rows', async () => {
    tamper("DELETE FROM audit_entries WHERE chain = 'north' AND seq = 5");
    expect((await verifyChain(db, 'north')).broken).toMatchObject({ seq: 5, defect: 'wrong-head' });
    tamper(
      "UPDATE audit_heads SET seq = 4, hash = (SELECT hash FROM audit_entries WHERE chain = 'north' AND seq = 4) WHERE chain = 'north'",
    );
    expect((await verifyChain(db, 'north')).broken).toMatchObject({ seq: 5, defect: 'unsealed-rows' });
  });
});

describe('checkpoints', () => {
  it('are signed so that an outsider can check them, and not altered unnoticed', async () => {
    const checkpoint = makeCheckpoint(db, 'north', now)!;
    const [key] = storedKeys(db);
    expect(verifyCheckpoint(checkpoint, key!.publicPem)).toBe(true);
    expect(verifyCheckpoint({ ...checkpoint, seq: 4 }, key!.publicPem)).toBe(false);
    expect(makeCheckpoint(db, 'north', now)).toEqual(checkpoint);
    tamper("UPDATE audit_checkpoints SET at = '2025' WHERE chain = 'north'");
    expect((await verifyChain(db, 'north')).broken).toMatchObject({ seq: 5, defect: 'wrong-signature' });
  });
});

describe('records', () => {
  it('are read as they were known at a time', () => {
    const ledger = openLedger(db, now);
    const change = { clinicId: 'north', actor, kind: 'device.changed', subject: 'd' };
    const put = (version: number, name: string) =>
      ledger.change(change, (writer) => insertRecord(writer, 'devices', { id: 'd', version, content: { name } }));
    const first = put(1, 'old');
    clock += 60_000;
    put(2, 'new');
    const reader = ledger.reader('north');
    expect(findRecord(reader, 'devices', 'd')?.content).toEqual({ name: 'new' });
    expect(findRecord(reader, 'devices', 'd', first.recordedAt)?.content).toEqual({ name: 'old' });
    expect(findRecord(reader, 'devices', 'd', '2020')).toBeNull();
    expect(findRecord(ledger.reader('south'), 'devices', 'd')).toBeNull();
    expect(findVersions(reader, 'devices', 'd')).toHaveLength(2);
    expect(listRecords(reader, 'devices', { count: 10 }).map(({ version }) => version)).toEqual([2]);
    expect(listRecords(reader, 'devices', { count: 10, asOf: first.recordedAt }).map(({ version }) => version)).toEqual([1]);
    expect(listRecords(reader, 'courses', { count: 4 })).toHaveLength(4);
  });

  it('of a parent come in the order of their time', () => {
    const ledger = openLedger(db, now);
    ledger.change({ clinicId: 'north', actor, kind: 'x', subject: 'x' }, (writer) => {
      for (const [id, atMs] of [
        ['b', 5],
        ['a', 5],
        ['c', -1],
      ] as const)
        insertRecord(writer, 'checks', { id, parentId: 'd', atMs, content: {} });
    });
    const reader = ledger.reader('north');
    expect(listOfParent(reader, 'checks', 'd').map(({ id }) => id)).toEqual(['c', 'a', 'b']);
    expect(listOfParent(reader, 'checks', 'd', { after: [5, 'a'], count: 5 }).map(({ id }) => id)).toEqual(['b']);
    expect(listOfParent(ledger.reader('south'), 'checks', 'd')).toEqual([]);
  });
});
