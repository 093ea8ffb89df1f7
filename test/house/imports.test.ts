import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));

const domainFloors: Readonly<Record<string, number>> = {
  quantities: 0,
  numeric: 1,
  spectra: 2,
  beam: 2,
  media: 2,
  tissue: 3,
  transport: 4,
  thermal: 5,
  reference: 6,
  dosimetry: 7,
  targets: 7,
  safety: 7,
  interaction: 8,
  ranking: 9,
  alerts: 10,
};
const serverFloors: Readonly<Record<string, number>> = {
  'config.ts': 0,
  'clinical-banner.ts': 0,
  'version.ts': 0,
  schemas: 1,
  http: 2,
  codecs: 2,
  render: 2,
  workers: 2,
  db: 3,
  audit: 4,
  jobs: 4,
  reference: 4,
  'parts.ts': 5,
  api: 6,
  demo: 7,
  pages: 7,
  'app.ts': 8,
  cli: 9,
};

function filesBelow(folder: string): string[] {
  return readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
    .filter((name) => name.endsWith('.ts'))
    .map((name) => `${folder}/${name.replaceAll('\\', '/')}`);
}

const files = ['domain', 'server', 'migrations'].flatMap(filesBelow);
const sources = new Map(files.map((file) => [file, readFileSync(join(root, file), 'utf8')]));

interface Import {
  readonly file: string;
  readonly target: string;
}

const imports: Import[] = [...sources].flatMap(([file, text]) =>
  [...text.matchAll(/(?:^|\n)(?:import|export)\b[^;]*?from\s+'([^']+)'|import\('([^']+)'\)/g)].map((match) => ({
    file,
    target: (match[1] ?? match[2])!,
  })),
);

const resolved = ({ file, target }: Import): string =>
  relative(root, join(root, dirname(file), target))
    .replaceAll('\\', '/')
    .replace(/\.js$/, '.ts');

function floorOf(path: string): { side: string; room: string; floor: number } {
  const [side = '', room = ''] = path.split('/');
  const floor = (side === 'domain' ? domainFloors : serverFloors)[room];
  if (floor === undefined) throw new Error(`${path} lies in no known room`);
  return { side, room, floor };
}

describe('import rules', () => {
  it('sees the whole tree', () => {
    expect(files.length).toBeGreaterThan(150);
    expect(imports.length).toBeGreaterThan(500);
  });

  it('every relative import ends in .js and names a file that is there', () => {
    const wrong = imports
      .filter(({ target }) => target.startsWith('.'))
      .filter((one) => !one.target.endsWith('.js') || !sources.has(resolved(one)));
    expect(wrong).toEqual([]);
  });

  it('domain imports nothing from outside domain, and asks no clock, chance, console or file', () => {
    const outside = imports.filter(
      ({ file, target }) =>
        file.startsWith('domain/') && (!target.startsWith('.') || !resolved({ file, target }).startsWith('domain/')),
    );
    expect(outside).toEqual([]);
    const impure = [...sources].filter(
      ([file, text]) =>
        file.startsWith('domain/') &&
        /\bMath\.random|\bDate\b|\bconsole\.|\bprocess\.|\bperformance\./.test(text.replaceAll(/\/\*[\s\S]*?\*\/|\/\/.*/g, '')),
    );
    expect(impure.map(([file]) => file)).toEqual([]);
  });

  it('files import from lower floors or their own room', () => {
    const wrong = imports
      .filter(({ file, target }) => target.startsWith('.') && !file.startsWith('migrations/'))
      .map((one) => ({ from: floorOf(one.file), to: resolved(one), file: one.file }))
      .filter(({ to }) => !to.startsWith('migrations/'))
      .filter(({ from, to }) => {
        const there = floorOf(to);
        if (from.side !== there.side) return from.side === 'domain';
        return from.room !== there.room && there.floor >= from.floor;
      })
      .map(({ file, to }) => `${file} -> ${to}`);
    expect(wrong).toEqual([]);
  });

  it('a room of the api never uses the routes, schemas, actions, presenters or jobs of another', () => {
    const wrong = imports
      .filter(({ file, target }) => file.startsWith('server/api/') && target.startsWith('.'))
      .map((one) => ({ file: one.file, to: resolved(one) }))
      .filter(
        ({ file, to }) =>
          to.startsWith('server/api/') &&
          to.split('/')[2] !== file.split('/')[2] &&
          /\.(routes|schema|actions|present|jobs)\.ts$/.test(to),
      )
      .map(({ file, to }) => `${file} -> ${to}`);
    expect(wrong).toEqual([]);
  });

  it('only stores, db, audit, jobs and the health check prepare SQL; only config reads the environment', () => {
    const places = /\.store\.ts$|^server\/(db|audit|jobs)\/|^server\/api\/service\/service\.routes\.ts$/;
    const sql = [...sources].filter(
      ([file, text]) => file.startsWith('server/') && /\.prepare\(/.test(text) && !places.test(file),
    );
    expect(sql.map(([file]) => file)).toEqual([]);
    const environment = [...sources].filter(([file, text]) => /process\.env\b/.test(text) && file !== 'server/config.ts');
    expect(environment.map(([file]) => file)).toEqual([]);
  });
});

describe('house rules', () => {
  it('no file is longer than 400 lines, and names are kebab-case', () => {
    const long = [...sources].filter(([, text]) => text.split('\n').length > 401).map(([file]) => file);
    expect(long).toEqual([]);
    const odd = files.filter((file) => !/^[a-z0-9]+(-[a-z0-9]+)*(\.[a-z0-9-]+)*\.ts$/.test(file.split('/').at(-1)!));
    expect(odd).toEqual([]);
  });

  it('spelling is American, and no machine path stands in the tree', () => {
    const wrong = [...sources]
      .filter(([, text]) => /haemo|colour|\bfibre|vapour|\/home\/|\/root\/|\/tmp\//i.test(text))
      .map(([file]) => file);
    expect(wrong).toEqual([]);
  });

  it('every target and every migration is in its list', () => {
    const targets = sources.get('domain/targets/index.ts')!;
    const missing = files
      .filter((file) => file.startsWith('domain/targets/') && sources.get(file)!.includes('defineTarget({'))
      .filter((file) => !targets.includes(`./${file.split('/').at(-1)!.replace('.ts', '.js')}`));
    expect(missing).toEqual([]);
    const steps = files.filter((file) => /^migrations\/\d{4}-/.test(file));
    expect(
      steps.filter((file) => !sources.get('migrations/index.ts')!.includes(`./${file.split('/')[1]!.replace('.ts', '.js')}`)),
    ).toEqual([]);
  });

  it('the program gives the version of package.json', () => {
    const { name, version } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8')) as { name: string; version: string };
    expect(sources.get('server/version.ts')).toContain(`'${name} ${version}'`);
  });
});
