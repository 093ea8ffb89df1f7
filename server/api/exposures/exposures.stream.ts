import { PassThrough, Readable } from 'node:stream';
import { setImmediate as breathe } from 'node:timers/promises';
import { lineGroups } from '../../codecs/ndjson.js';
import type { Reader } from '../../db/reader.js';
import type { Actor } from '../../http/actor.js';
import { problemFor } from '../../http/problems.js';
import type { Parts } from '../../parts.js';
import type { ClinicBook } from './clinic-book.store.js';
import { logExposures } from './exposures.actions.js';
import { type BatchItem, csvText, exposurePresenter, ndjsonText, presentLogged } from './exposures.present.js';
import { type ExposureFilter, listExposures } from './exposures.store.js';

/** Lines that one change takes in. */
const groupSize = 500;
const mostLineBytes = 65_536;
/** What may wait for a client that sends all before it reads. */
const replyBufferBytes = 64 * 1024 * 1024;

/** Logs a stream of lines, a change per 500, and gives what became of each line. Throws when the first change fails; a later failure
 *  is told in a last line of status `failed`, and no line after it is stored. */
export async function logStream(parts: Parts, actor: Actor, body: Readable): Promise<Readable> {
  const results = logGroups(parts, actor, body);
  const first = await results.next();
  const out = new PassThrough({ highWaterMark: replyBufferBytes });
  void pump(first.done ? '' : first.value, results, out, parts);
  return out;
}

async function* logGroups(parts: Parts, actor: Actor, body: Readable): AsyncGenerator<string> {
  for await (const lines of lineGroups(body as AsyncIterable<Uint8Array>, groupSize, mostLineBytes)) {
    const items: (BatchItem | null)[] = [];
    const given: unknown[] = [];
    for (const { index, text } of lines) {
      const value = text === null ? tooLong : parseLine(text);
      items.push(
        value instanceof LineFault ? { index, status: 'rejected', errors: [{ pointer: '', detail: value.detail }] } : null,
      );
      if (!(value instanceof LineFault)) given.push(value);
    }
    const logged = logExposures(parts, actor, given);
    let at = 0;
    yield ndjsonText(lines.map(({ index }, i) => items[i] ?? presentLogged(index, logged[at++]!)));
  }
}

class LineFault {
  constructor(readonly detail: string) {}
}

const tooLong = new LineFault(`the line is longer than ${mostLineBytes} bytes`);
const notJson = new LineFault('the line is not valid JSON');

function parseLine(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return notJson;
  }
}

async function pump(first: string, results: AsyncGenerator<string>, out: PassThrough, parts: Parts): Promise<void> {
  try {
    out.write(first);
    for await (const text of results) {
      if (out.destroyed) return;
      if (!out.write(text)) await new Promise<void>((resolve) => out.once('drain', resolve).once('close', resolve));
    }
  } catch (error) {
    parts.log.warn({ err: error }, 'a stream of exposures ended early');
    out.write(ndjsonText([{ status: 'failed', problem: problemFor(error, '/v1/exposures') }]));
  }
  out.end();
}

/** All rows of a filter as CSV or NDJSON, page by page. */
export function exportStream(
  reader: Reader,
  book: ClinicBook,
  filter: Omit<ExposureFilter, 'count' | 'after'>,
  type: 'text/csv' | 'application/x-ndjson',
): Readable {
  return Readable.from(pages(reader, book, filter, type));
}

async function* pages(
  reader: Reader,
  book: ClinicBook,
  filter: Omit<ExposureFilter, 'count' | 'after'>,
  type: 'text/csv' | 'application/x-ndjson',
) {
  const present = exposurePresenter(reader, book);
  let after: readonly [number, number] | undefined;
  for (let isFirst = true; ; isFirst = false) {
    const rows = listExposures(reader, { ...filter, after, count: groupSize });
    const items = rows.map(present);
    if (type === 'text/csv') yield csvText(items, isFirst);
    else if (items.length > 0) yield ndjsonText(items);
    const last = rows[rows.length - 1];
    if (!last || rows.length < groupSize) return;
    after = [last.atMs, last.rowNo];
    await breathe();
  }
}
