import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { listDataFiles, sha256Of } from '../../server/reference/load.js';
import { dataFolder } from './data-folder.js';

// Writes data/manifest.csv anew. Run after any deliberate change of a data file, and say in the commit what changed.
const version = '2026-12';
const rows = listDataFiles(dataFolder)
  .filter((name) => name !== 'bibliography.csv')
  .map((name) => `${name},${version},${sha256Of(readFileSync(join(dataFolder, name)))}`);
writeFileSync(join(dataFolder, 'manifest.csv'), ['name,version,sha256', ...rows, ''].join('\n'));
