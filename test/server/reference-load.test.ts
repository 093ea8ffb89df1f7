import { cpSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { listDataFiles, loadReferenceData } from '../../server/reference/load.js';
import { dataFolder } from '../support/data-folder.js';

let copy: string;
beforeEach(() => {
  copy = mkdtempSync(join(tmpdir(), 'reference-data-'));
  cpSync(dataFolder, copy, { recursive: true });
});
afterEach(() => rmSync(copy, { recursive: true, force: true }));

function change(name: string, edit: (lines: string[]) => string[]): void {
  const file = join(copy, name);
  writeFileSync(file, edit(readFileSync(file, 'utf8').split('\n')).join('\n'));
}

// '=' stands for the first cell of the line as it was.
function setLine(name: string, line: number, text: string): void {
  change(name, (lines) => lines.with(line - 1, text.replace('=', lines[line - 1]!.split(',')[0]!)));
}

describe('loading reference data', () => {
  it('gives every file with its hash, frozen', () => {
    const reference = loadReferenceData(copy);
    expect(reference.files.map(({ name }) => name)).toEqual(listDataFiles(copy).filter((name) => name !== 'bibliography.csv'));
    for (const { sha256, version } of reference.files) {
      expect(sha256).toMatch(/^[0-9a-f]{64}$/);
      expect(version).toBeTruthy();
    }
    expect(Object.isFrozen(reference)).toBe(true);
    expect(reference.media.length).toBeGreaterThan(40);
    expect(reference.ablation.size).toBeGreaterThan(20);
    for (const id of ['epidermis', 'dermis', 'fat', 'blood', 'hair-shaft', 'melanosome', 'water', 'sapphire']) {
      expect(reference.thermal.materials.has(id)).toBe(true);
    }
    for (const id of ['epidermis-henriques', 'vessel-wall', 'whole-blood', 'hair-follicle', 'collagen-rat-skin']) {
      expect(reference.thermal.damagePairs.has(id)).toBe(true);
    }
    for (const id of ['none', 'contact', 'cryogen-spray', 'chilled-air']) expect(reference.thermal.cooling.has(id)).toBe(true);
  });

  it.each([
    ['a value that is no number', 'chromophores/water.csv', 40, '=,0.00x', /water\.csv line 40: absorption_per_cm is '0\.00x'/],
    ['a negative value', 'chromophores/water.csv', 40, '=,-1', /water\.csv line 40: absorption_per_cm is '-1'/],
    [
      'wavelengths that do not rise',
      'chromophores/oxyhemoglobin.csv',
      30,
      '252,1000',
      /oxyhemoglobin\.csv line 30: .*does not rise/,
    ],
    ['a row cut short', 'chromophores/oxyhemoglobin.csv', 30, '330', /oxyhemoglobin\.csv line 30: 1 cells where 2 belong/],
    ['an empty line', 'chromophores/oxyhemoglobin.csv', 30, '', /oxyhemoglobin\.csv line 30: 1 cells where 2 belong/],
    ['a header line out of form', 'chromophores/lipid.csv', 2, '#name', /lipid\.csv line 2: a header line/],
    [
      'an unknown source',
      'chromophores/lipid.csv',
      6,
      '# source: Nobody1900',
      /lipid\.csv.*'Nobody1900' is not in the bibliography/,
    ],
    ['an id that is not the name of the file', 'chromophores/lipid.csv', 1, '# id: fat', /lipid\.csv line 1: id 'fat'/],
    ['an unknown status', 'chromophores/lipid.csv', 7, '# status: sure', /lipid\.csv.*status is 'sure'/],
    ['a spread out of form', 'chromophores/lipid.csv', 8, '# spread: some', /lipid\.csv.*spread 'some'/],
    ['other columns', 'tissue/anisotropy.csv', 3, 'layer,g', /anisotropy\.csv line 3: columns must be/],
    [
      'a value outside its own bounds',
      'tissue/structure.csv',
      4,
      'epidermis_thickness,8,60,116,um,Dremin2019,read,',
      /structure\.csv line 4: value is '8'/,
    ],
    [
      'an unknown parameter',
      'tissue/structure.csv',
      4,
      'epidermis,80,60,116,um,Dremin2019,read,',
      /structure\.csv line 4: parameter 'epidermis' is unknown/,
    ],
    [
      'an impossible conductivity',
      'thermal/materials.csv',
      4,
      'epidermis,0,1150,3600,YeDe2017,read,',
      /materials\.csv line 4: conductivity/,
    ],
    [
      'a pulse that ends before it begins',
      'media/lines.csv',
      5,
      'x,y,193,pulsed,5e-8,3e-9,LaserHandbooks,read,',
      /lines\.csv line 5: pulse_max_s/,
    ],
  ])('refuses %s, naming file and line', (_, name, line, text, message) => {
    setLine(name, line, text);
    expect(() => loadReferenceData(copy)).toThrow(message);
  });

  it('refuses a change that still reads well, by the hash', () => {
    change('chromophores/water.csv', (lines) => lines.map((line) => (line.startsWith('200,') ? '200,0.0308' : line)));
    expect(() => loadReferenceData(copy)).toThrow(/chromophores\/water\.csv: its content does not match manifest\.csv line \d+/);
  });

  it('refuses an id that stands twice, naming the line of the second', () => {
    change('thermal/damage.csv', (lines) => [...lines.slice(0, -1), lines[3]!, '']);
    expect(() => loadReferenceData(copy)).toThrow(/damage\.csv line \d+: id 'epidermis-henriques' stands twice/);
  });

  it('refuses a missing file, an unlisted file and a missing manifest', () => {
    rmSync(join(copy, 'thermal/damage.csv'));
    expect(() => loadReferenceData(copy)).toThrow(/thermal\/damage\.csv: listed in manifest\.csv but not there/);
    cpSync(join(dataFolder, 'thermal/damage.csv'), join(copy, 'thermal/damage.csv'));
    writeFileSync(join(copy, 'thermal/more.csv'), 'a\n1\n');
    expect(() => loadReferenceData(copy)).toThrow(/thermal\/more\.csv: not listed/);
    rmSync(join(copy, 'manifest.csv'));
    expect(() => loadReferenceData(copy)).toThrow(/manifest\.csv: not there/);
  });

  it('takes one more source in the bibliography, but no key twice', () => {
    change('bibliography.csv', (lines) => [...lines.slice(0, -1), 'Someone1999,"A. Someone, A paper (1999)",', '']);
    expect(loadReferenceData(copy).bibliography.has('Someone1999')).toBe(true);
    change('bibliography.csv', (lines) => [...lines.slice(0, -1), lines[1]!, '']);
    expect(() => loadReferenceData(copy)).toThrow(/bibliography\.csv line \d+: key '\w+' stands twice/);
  });

  it('refuses an empty file', () => {
    writeFileSync(join(copy, 'chromophores/water.csv'), '');
    expect(() => loadReferenceData(copy)).toThrow(/chromophores\/water\.csv/);
  });
});
