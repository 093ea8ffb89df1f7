import { fork } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

export interface ServedApp {
  readonly address: string;
  readonly headers: Readonly<Record<string, string>>;
  /** Processor time of the server so far, in seconds. */
  readonly cpuS: () => Promise<number>;
  /** What POST /constant answers from now on. */
  readonly answerConstantly: (body: unknown) => Promise<void>;
  readonly stop: () => Promise<void>;
}

/** The app in a process of its own, so that a client does not share its core. */
export async function serveApp(): Promise<ServedApp> {
  const file = fileURLToPath(new URL('./peer/served-app.ts', import.meta.url));
  const child = fork(file, { execArgv: ['--import', 'tsx'], stdio: ['ignore', 'ignore', 'inherit', 'ipc'] });
  const [{ address, secret }] = (await once(child, 'message')) as [{ address: string; secret: string }];
  const ask = async (message: object) => {
    child.send(message);
    const [reply] = (await once(child, 'message')) as [{ cpuS: number }];
    return reply.cpuS;
  };
  return {
    address,
    headers: { authorization: `Bearer ${secret}`, 'content-type': 'application/json' },
    cpuS: () => ask({}),
    answerConstantly: async (body) => void (await ask({ constant: body })),
    stop: async () => {
      child.send({ stop: true });
      await once(child, 'exit');
    },
  };
}
