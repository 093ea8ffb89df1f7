import type { ReplyShelf, StoredReply } from '../http/idempotency.js';
import type { Db } from './database.js';

/** Kept answers. Those left in progress by a process that died are given up at start. */
export function openReplyShelf(db: Db, now: () => Date): ReplyShelf {
  db.prepare('DELETE FROM idempotent_replies WHERE status IS NULL').run();
  const select = db.prepare(
    'SELECT request_sha256 AS requestSha256, status, headers, body FROM idempotent_replies WHERE scope = ? AND idempotency_key = ?',
  );
  const insert = db.prepare(
    'INSERT INTO idempotent_replies (scope, idempotency_key, request_sha256, created_at) VALUES (?, ?, ?, ?) ON CONFLICT DO NOTHING',
  );
  const update = db.prepare(
    'UPDATE idempotent_replies SET status = ?, headers = ?, body = ? WHERE scope = ? AND idempotency_key = ?',
  );
  const remove = db.prepare('DELETE FROM idempotent_replies WHERE scope = ? AND idempotency_key = ?');
  return {
    find: (scope, key) => (select.get(scope, key) as StoredReply | undefined) ?? null,
    begin: (scope, key, requestSha256) => insert.run(scope, key, requestSha256, now().toISOString()).changes === 1,
    finish: (scope, key, status, headers, body) => void update.run(status, headers, Buffer.from(body), scope, key),
    drop: (scope, key) => void remove.run(scope, key),
  };
}
