import { createRequire } from 'node:module';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { Piscina } from 'piscina';
import type { ChunkTask } from './monte-carlo.worker.js';

export interface PhotonPool {
  readonly threads: number;
  walkChunk(task: ChunkTask, signal: AbortSignal): Promise<Float64Array>;
  close(): Promise<void>;
}

const idleMs = 5_000; // idle threads end, so that a service without runs holds none

/** Worker threads for photon chunks. Threads start with the first chunk. */
export function openPhotonPool(threads: number): PhotonPool {
  const self = fileURLToPath(import.meta.url);
  const uncompiled = self.endsWith('.ts');
  const piscina = new Piscina<ChunkTask, Float64Array>({
    filename: fileURLToPath(new URL(`./monte-carlo.worker.${uncompiled ? 'ts' : 'js'}`, import.meta.url)),
    name: 'walkChunk',
    minThreads: 0,
    maxThreads: threads,
    idleTimeout: idleMs,
    execArgv: uncompiled ? ['--import', pathToFileURL(createRequire(self).resolve('tsx')).href] : [],
  });
  // A chunk that ends just as it is aborted reports to nobody; the pool tells that as an error, which without a listener would end the
  // process. Faults of chunks themselves reach whoever asked for them.
  piscina.on('error', () => {});
  return {
    threads,
    walkChunk: (task, signal) => piscina.run(task, { signal }),
    close: () => piscina.destroy(),
  };
}
