import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { pino } from 'pino';
import { makeFirstKey } from '../api/keys/keys.actions.js';
import { openKeyStore } from '../api/keys/keys.store.js';
import { buildApp } from '../app.js';
import { type Config, ConfigError, readConfig } from '../config.js';
import { DatabaseError } from '../db/database-error.js';
import { closeParts, openParts } from '../parts.js';
import { DataError } from '../reference/data-file.js';

const demoDatabase = 'file:./var/demo.sqlite';

// The program runs from its sources or, compiled, from dist/ below them.
export function dataFolder(): string {
  const candidates = ['../../data', '../../../data'].map((path) => fileURLToPath(new URL(path, import.meta.url)));
  return candidates.find((path) => existsSync(path)) ?? candidates[0]!;
}

/** Serves until told to stop. Gives the exit code; what cannot start says why in one line. */
export async function start(environment: Readonly<Record<string, string | undefined>>, demo: boolean): Promise<number> {
  try {
    return await serve(
      readConfig(demo && !environment.DATABASE_URL ? { ...environment, DATABASE_URL: demoDatabase } : environment),
      demo,
    );
  } catch (error) {
    const code = (error as { code?: string }).code;
    if (code === 'EADDRINUSE') process.stderr.write('the port is taken; choose another with --port\n');
    else if (code === 'EACCES' || code === 'EADDRNOTAVAIL') process.stderr.write(`cannot listen there: ${code}\n`);
    else if (error instanceof ConfigError || error instanceof DatabaseError || error instanceof DataError)
      process.stderr.write(`${error.message}\n`);
    else throw error;
    return 1;
  }
}

async function serve(config: Config, demo: boolean): Promise<number> {
  const log = pino({ level: config.logLevel, base: null }, pino.destination({ dest: 2, sync: true }));
  const parts = openParts({ config, log, dataFolder: dataFolder(), now: () => new Date() });
  try {
    const app = await buildApp(parts);
    const first = makeFirstKey(parts, openKeyStore(parts.db));
    const address = await app.listen({ host: config.host, port: config.port });
    if (first) process.stdout.write(`administrator key, shown this once: ${first.secret}\n`);
    if (demo) announceDemo(address, first?.secret);
    process.stdout.write(`listening ${address}\n`);
    const signal = await stopSignal();
    log.info({ signal }, 'stopping');
    const timer = setTimeout(() => process.exit(0), config.shutdownS * 1000);
    timer.unref();
    await app.close();
    return 0;
  } finally {
    await closeParts(parts);
  }
}

function announceDemo(address: string, secret: string | undefined): void {
  if (secret === undefined) {
    process.stdout.write(
      'the demo database exists already; use the key that was shown when it was made, or delete the file to start anew\n',
    );
    return;
  }
  const body = JSON.stringify({
    skin: { phototype: 'II' },
    target: { kind: 'vessel', diameterUm: 100, depthMm: 0.4 },
    spot: { shape: 'circle', diameterMm: 7 },
    cooling: { kind: 'contact', temperatureC: 5 },
    candidates: { wavelengthsNm: [532, 585, 595, 755, 1064] },
    pulseDurationsS: [0.0015, 0.01],
  });
  process.stdout.write(
    `try: curl -s ${address}/v1/rankings -H 'authorization: Bearer ${secret}' -H 'content-type: application/json' -d '${body}'\n`,
  );
}

function stopSignal(): Promise<string> {
  return new Promise((resolve) => {
    for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => resolve(signal));
  });
}
