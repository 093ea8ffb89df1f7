import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { join, relative, sep } from 'node:path';
import type { DataFile, ReferenceData } from '../../domain/reference/reference-data.js';
import { hemoglobinTables } from '../../domain/spectra/blood.js';
import { DataError, parseDataFile, textIn } from './data-file.js';
import { readChromophore, readWholeBlood } from './read-spectra.js';
import { readAblation, readLines, readThermal } from './read-tables.js';
import { readSkinFigures } from './read-tissue.js';

const manifestName = 'manifest.csv';
const bibliographyName = 'bibliography.csv'; // words, checked for shape alone, so that a source is added in one line

/** Every CSV file of figures and sources below the data folder, by its name with forward slashes, in a stable order. */
export function listDataFiles(dataFolder: string): string[] {
  return (readdirSync(dataFolder, { recursive: true, withFileTypes: true }) as import('node:fs').Dirent[])
    .filter((entry) => entry.isFile() && entry.name.endsWith('.csv') && entry.name !== manifestName)
    .map((entry) => relative(dataFolder, join(entry.parentPath, entry.name)).split(sep).join('/'))
    .sort();
}

export function sha256Of(bytes: Uint8Array): string {
  return createHash('sha256').update(bytes).digest('hex');
}

/** Reads all reference data once and checks shape, order, range and hash. Throws DataError naming the file and line. */
export function loadReferenceData(dataFolder: string): ReferenceData {
  const texts = new Map<string, string>();
  const files: DataFile[] = [];
  const manifest = readManifest(dataFolder);
  for (const name of listDataFiles(dataFolder)) {
    const bytes = readFileSync(join(dataFolder, name));
    texts.set(name, bytes.toString('utf8'));
    if (name === bibliographyName) continue;
    const entry = manifest.get(name);
    if (!entry)
      throw new DataError(name, null, `not listed in ${manifestName}; write it anew with test/support/make-data-manifest.ts`);
    files.push({ name, version: entry.version, sha256: sha256Of(bytes) });
    manifest.delete(name);
  }
  const [missing] = manifest.keys();
  if (missing) throw new DataError(missing, null, `listed in ${manifestName} but not there`);

  const text = (name: string): string => {
    const found = texts.get(name);
    if (found === undefined) throw new DataError(name, null, 'not there');
    return found;
  };
  const bibliography = readBibliography(text(bibliographyName));
  const folder = (prefix: string) =>
    new Map(
      [...texts.keys()]
        .filter((name) => name.startsWith(prefix))
        .map((name) => {
          const chromophore = readChromophore(name, text(name), bibliography);
          return [chromophore.id, chromophore] as const;
        }),
    );
  const reference: ReferenceData = {
    chromophores: folder('chromophores/'),
    alternatives: folder('alternatives/'),
    wholeBlood: readWholeBlood(text('tissue/whole-blood.csv')),
    hemoglobin: hemoglobinTables.prahl1998,
    skin: readSkinFigures(text),
    thermal: readThermal(text),
    media: readLines(text('media/lines.csv')),
    ablation: readAblation(text),
    files,
    bibliography,
  };
  verifyHashes(files, readManifest(dataFolder));
  return Object.freeze(reference);
}

interface ManifestEntry {
  readonly version: string;
  readonly sha256: string;
  readonly line: number;
}

function readManifest(dataFolder: string): Map<string, ManifestEntry> {
  let text: string;
  try {
    text = readFileSync(join(dataFolder, manifestName), 'utf8');
  } catch {
    throw new DataError(manifestName, null, 'not there');
  }
  const parsed = parseDataFile(manifestName, text, ['name', 'version', 'sha256']);
  return new Map(
    parsed.rows.map((row) => [
      textIn(parsed, row, 'name'),
      { version: textIn(parsed, row, 'version'), sha256: textIn(parsed, row, 'sha256'), line: row.line },
    ]),
  );
}

// Last, so that a damaged line is named by what is wrong with it where that can be seen, and by the hash only where it cannot.
function verifyHashes(files: readonly DataFile[], manifest: ReadonlyMap<string, ManifestEntry>): void {
  for (const { name, sha256 } of files) {
    const entry = manifest.get(name);
    if (entry && entry.sha256 !== sha256) {
      throw new DataError(
        name,
        null,
        `its content does not match ${manifestName} line ${entry.line}: the file was changed or damaged`,
      );
    }
  }
}

function readBibliography(text: string): Map<string, string> {
  const parsed = parseDataFile('bibliography.csv', text, ['key', 'citation', 'doi']);
  const entries = new Map<string, string>();
  for (const row of parsed.rows) {
    const key = textIn(parsed, row, 'key');
    if (entries.has(key)) throw new DataError('bibliography.csv', row.line, `key '${key}' stands twice`);
    const doi = row.cells.doi;
    entries.set(key, textIn(parsed, row, 'citation') + (doi ? `, doi:${doi}` : ''));
  }
  return entries;
}
