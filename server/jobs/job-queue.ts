/** Long work of this process, one job at a time in the order it came. What a job is, and where it is kept, is its owner's matter. */
export interface JobQueue {
  /** False when the queue is full; jobs of an earlier process come in regardless. */
  offer(id: string, fromEarlierProcess?: boolean): boolean;
  /** Drops a waiting job, or aborts the running one; true when there was one. */
  cancel(id: string): boolean;
  readonly waiting: number;
  readonly isFull: boolean;
  /** Aborts the running job, drops the rest, and waits for the end. */
  close(): Promise<void>;
}

export function openJobQueue(mostWaiting: number, work: (id: string, signal: AbortSignal) => Promise<void>): JobQueue {
  const waiting: string[] = [];
  let running: { id: string; abort: AbortController; done: Promise<void> } | undefined;
  let closed = false;
  const startNext = () => {
    const id = closed || running ? undefined : waiting.shift();
    if (id === undefined) return;
    const abort = new AbortController();
    const done = work(id, abort.signal).finally(() => {
      running = undefined;
      startNext();
    });
    running = { id, abort, done };
  };
  return {
    offer: (id, fromEarlierProcess = false) => {
      if (closed || (!fromEarlierProcess && running && waiting.length >= mostWaiting)) return false;
      waiting.push(id);
      startNext();
      return true;
    },
    cancel: (id) => {
      const place = waiting.indexOf(id);
      if (place >= 0) waiting.splice(place, 1);
      else if (running?.id === id) running.abort.abort();
      else return false;
      return true;
    },
    get waiting() {
      return waiting.length;
    },
    get isFull() {
      return closed || (running !== undefined && waiting.length >= mostWaiting);
    },
    close: async () => {
      closed = true;
      waiting.length = 0;
      running?.abort.abort();
      await running?.done;
    },
  };
}
