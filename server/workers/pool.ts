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
  return {
    threads,
    walkChunk: (task, signal) => piscina.run(task, { signal }),
    close: () => piscina.destroy(),
  };
}
