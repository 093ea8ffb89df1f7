import type { Actor } from '../http/actor.js';
import type { Ledger } from './with-audit.js';

interface Access {
  readonly at: string;
  readonly actor: string;
  readonly path: string;
  readonly subject: string;
}

/** Who read what of people. Reads are gathered for a moment and enter the chain together, so that reading stays cheap. */
export interface AccessLog {
  note(actor: Actor, path: string, subject: string): void;
  /** Writes what has gathered. */
  flush(): void;
  close(): void;
}

const gatherMs = 200;
const mostGathered = 500;

export function openAccessLog(ledger: Ledger, now: () => Date, reportFailure: (error: unknown) => void): AccessLog {
  let gathered = new Map<string | null, Access[]>();
  let count = 0;
  let timer: NodeJS.Timeout | undefined;
  const flush = () => {
    clearTimeout(timer);
    timer = undefined;
    const taken = gathered;
    gathered = new Map();
    count = 0;
    for (const [clinicId, accesses] of taken) {
      try {
        ledger.change({ clinicId, actor: 'system', kind: 'accessed', subject: 'records' }, (writer) => writer.note({ accesses }));
      } catch (error) {
        reportFailure(error);
        const kept = [...accesses, ...(gathered.get(clinicId) ?? [])];
        gathered.set(clinicId, kept);
        count += kept.length;
      }
    }
  };
  return {
    note(actor, path, subject) {
      const list = gathered.get(actor.clinicId);
      const access = { at: now().toISOString(), actor: actor.keyId, path, subject };
      if (list) list.push(access);
      else gathered.set(actor.clinicId, [access]);
      count++;
      if (count >= mostGathered && count % mostGathered === 0) flush();
      else timer ??= setTimeout(flush, gatherMs);
    },
    flush,
    close: () => {
      flush();
      clearTimeout(timer);
    },
  };
}
