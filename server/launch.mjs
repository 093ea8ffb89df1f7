// Installs and builds what is missing, then runs one command. Needs nothing but Node and, for the first install, what node-gyp needs.
import { spawn, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const [command = 'start', ...rest] = process.argv.slice(2);

const [major, minor] = process.versions.node.split('.').map(Number);
if (major < 20 || (major === 20 && minor < 19)) fail(`Node 20.19 or later is needed; this is ${process.versions.node}`);

function fail(message) {
  process.stderr.write(`${message}\n`);
  process.exit(1);
}

function run(file, args, extra = {}) {
  const done = spawnSync(process.execPath, [file, ...args], { cwd: root, stdio: 'inherit', ...extra });
  if (done.status !== 0) process.exit(done.status ?? 1);
}

function installed() {
  const lock = createHash('sha256')
    .update(readFileSync(join(root, 'package-lock.json')))
    .digest('hex');
  const marker = join(root, 'node_modules', '.installed-lock');
  if (existsSync(marker) && readFileSync(marker, 'utf8') === lock) return;
  process.stderr.write('installing packages (the first time takes a minute or two)\n');
  const npm = process.env.npm_execpath;
  const args = ['ci', '--no-audit', '--no-fund'];
  const options = { cwd: root, stdio: ['ignore', 2, 2] };
  const done = npm?.endsWith('.js') ? spawnSync(process.execPath, [npm, ...args], options) : spawnSync('npm', args, options);
  if (done.status !== 0) fail('npm ci failed; it needs a C++ compiler, make and Python for better-sqlite3');
  writeFileSync(marker, lock);
}

function newest(folder) {
  let time = 0;
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    const path = join(folder, entry.name);
    time = Math.max(time, entry.isDirectory() ? newest(path) : statSync(path).mtimeMs);
  }
  return time;
}

function built() {
  const marker = join(root, 'dist', '.built');
  const sources = ['domain', 'server', 'migrations'].map((folder) => newest(join(root, folder)));
  if (existsSync(marker) && statSync(marker).mtimeMs > Math.max(...sources)) return;
  run(bin('typescript/bin/tsc'), ['-p', 'tsconfig.build.json'], { stdio: ['ignore', 2, 2] });
  mkdirSync(join(root, 'dist'), { recursive: true });
  writeFileSync(marker, '');
}

function bin(path) {
  return join(root, 'node_modules', path);
}

function withTsx(file) {
  run(bin('tsx/dist/cli.mjs'), [file, ...rest]);
}

const commands = {
  start() {
    built();
    const child = spawn(process.execPath, [join(root, 'dist', 'server', 'cli', 'main.js'), ...rest], {
      cwd: root,
      stdio: 'inherit',
    });
    for (const signal of ['SIGTERM', 'SIGINT']) process.on(signal, () => child.kill(signal));
    child.on('exit', (code, signal) => process.exit(code ?? (signal ? 1 : 0)));
  },
  test() {
    run(bin('typescript/bin/tsc'), ['-p', 'tsconfig.json', '--noEmit']);
    run(bin('@biomejs/biome/bin/biome'), ['check', '.']);
    built();
    run(bin('vitest/vitest.mjs'), ['run', ...rest]);
  },
  'test:slow'() {
    built();
    run(bin('vitest/vitest.mjs'), ['run', '--config', 'vitest.slow.config.ts', ...rest]);
  },
  bench() {
    built();
    withTsx('test/bench/index.ts');
  },
  accuracy() {
    withTsx('test/support/accuracy.ts');
  },
};

if (!(command in commands)) fail(`unknown command ${command}; there are ${Object.keys(commands).join(', ')}`);
installed();
commands[command]();
