// The app on a free port with one route more that answers a constant; a parent asks for the processor time used so far.
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { pino } from 'pino';
import { makeFirstKey } from '../../../server/api/keys/keys.actions.js';
import { openKeyStore } from '../../../server/api/keys/keys.store.js';
import { buildApp } from '../../../server/app.js';
import { readConfig } from '../../../server/config.js';
import { closeParts, openParts } from '../../../server/parts.js';
import { dataFolder } from '../../support/data-folder.js';

const folder = mkdtempSync(path.join(tmpdir(), 'served-app-'));
const environment = {
  DATABASE_URL: `file:${path.join(folder, 'ledger.sqlite')}`,
  RATE_LIMIT_PER_MINUTE: '100000000',
  LOG_LEVEL: 'silent',
};
const parts = openParts({ config: readConfig(environment), log: pino({ level: 'silent' }), dataFolder, now: () => new Date() });
let constant: unknown = {};
const app = await buildApp(parts, (beside) => {
  beside.post('/constant', { config: { role: 'reader' }, schema: { hide: true } }, async (_request, reply) =>
    reply.send(constant),
  );
});
const secret = makeFirstKey(parts, openKeyStore(parts.db))?.secret;
const address = await app.listen({ host: '127.0.0.1', port: 0 });
process.on('message', async (message: { constant?: unknown; stop?: boolean }) => {
  if (message.stop) {
    await app.close();
    await closeParts(parts);
    rmSync(folder, { recursive: true, force: true });
    process.disconnect();
    return;
  }
  if (message.constant !== undefined) constant = message.constant;
  const { user, system } = process.cpuUsage();
  process.send?.({ cpuS: (user + system) / 1e6 });
});
process.send?.({ address, secret });
