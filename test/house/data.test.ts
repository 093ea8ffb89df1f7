import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { parseDataFile } from '../../server/reference/data-file.js';
import { listDataFiles } from '../../server/reference/load.js';
import { referenceData } from '../support/ask.js';
import { dataFolder } from '../support/data-folder.js';
import { listTopics, readTruth } from '../support/truth.js';

const { bibliography } = referenceData();
const files = listDataFiles(dataFolder).filter((name) => name !== 'bibliography.csv');
const statuses = ['read', 'read-secondary', 'derived', 'from-memory'];

function read(name: string) {
  const text = readFileSync(join(dataFolder, name), 'utf8');
  const columns = text.split('\n').find((line) => !line.startsWith('#'))!;
  return parseDataFile(name, text, columns.split(','));
}

describe('data files', () => {
  it('are seen: at least 22', () => {
    expect(files.length).toBeGreaterThanOrEqual(22);
  });

  it.each(files)('%s carries its provenance: id, quantity, and a known source and status for every figure', (name) => {
    const { header, rows } = read(name);
    expect(name.endsWith(`/${header.id}.csv`)).toBe(true);
    expect(header.quantity).toBeTruthy();
    const perRow = 'source' in rows[0]!.cells;
    const claims = perRow ? rows.map(({ cells }) => cells) : [header];
    for (const { source, status } of claims) {
      expect(statuses).toContain(status);
      for (const key of source!.split(' ')) expect(bibliography.has(key), `${name}: ${key}`).toBe(true);
    }
  });

  it('bibliography: every key is a word with a citation that is more than the key', () => {
    for (const [key, citation] of bibliography) {
      expect(key).toMatch(/^[A-Za-z][A-Za-z0-9]+$/);
      expect(citation.length).toBeGreaterThan(10);
    }
  });
});

const root = fileURLToPath(new URL('../../domain/', import.meta.url));
const sources = (readdirSync(root, { recursive: true }) as string[]).filter((name) => name.endsWith('.ts'));

describe('sources named in the physics', () => {
  const keyLike = /\b[A-Z][A-Za-z]+(?:18|19|20)\d\d[a-z]?\b/g;

  it.each(sources)('domain/%s cites only keys of the bibliography', (name) => {
    const text = readFileSync(join(root, name), 'utf8');
    const cited = [...text.matchAll(/@source ([^\n]*(?:\n \* {2}(?!@|Throws|Valid|Shape|Letters)[^\n]*)*)/g)].map(
      ([, cite]) => cite!,
    );
    const named = [...text.matchAll(/source: '([^']+)'/g)].map(([, cite]) => cite!);
    const keys = [...cited, ...named].flatMap((cite) => cite.match(keyLike) ?? []);
    expect(keys.filter((key) => !bibliography.has(key))).toEqual([]);
  });

  it('are many', () => {
    const all = sources.map((name) => readFileSync(join(root, name), 'utf8')).join('\n');
    expect(all.match(/@source/g)!.length).toBeGreaterThan(60);
  });
});

describe('figures from outside', () => {
  it('number at least 60 that were read or are analytic, over at least 5 topics', () => {
    const rows = listTopics().flatMap(readTruth);
    expect(listTopics().length).toBeGreaterThanOrEqual(5);
    expect(rows.filter(({ status }) => ['read', 'read-secondary', 'analytic'].includes(status)).length).toBeGreaterThanOrEqual(
      60,
    );
  });
});
