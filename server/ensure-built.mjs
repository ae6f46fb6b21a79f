// Makes a fresh clone ready: packages when they are missing or older than the lock file, a build when it is
// missing or older than the sources. Plain Node, because nothing is installed yet.
import { spawnSync } from 'node:child_process';
import { existsSync, readdirSync, statSync } from 'node:fs';
import { join } from 'node:path';

const major = Number(process.versions.node.split('.')[0]);
if (major < 20) {
  console.error(`Elbowroom needs Node 20 or newer; this is ${process.version}.`);
  process.exit(1);
}

function run(...args) {
  const { status } = spawnSync('npm', args, { stdio: 'inherit', shell: process.platform === 'win32' });
  if (status !== 0) {
    console.error(`npm ${args.join(' ')} failed. Nothing was started.`);
    process.exit(status ?? 1);
  }
}

const changedAt = (path) => (existsSync(path) ? statSync(path).mtimeMs : 0);

function newest(path) {
  if (!existsSync(path)) return 0;
  const info = statSync(path);
  if (!info.isDirectory()) return info.mtimeMs;
  return Math.max(0, ...readdirSync(path).map((name) => newest(join(path, name))));
}

if (changedAt('node_modules/.package-lock.json') < changedAt('package-lock.json')) {
  console.log('Installing packages (once; a minute or a few).');
  run('ci', '--no-audit', '--no-fund');
}
if (!process.argv.includes('--packages-only')) {
  const sources = [
    'src',
    'server',
    'shared',
    'firmware-sim',
    'drizzle',
    'index.html',
    'public',
    'vite.config.ts',
    'tailwind.config.ts',
    'package-lock.json',
  ];
  const built = Math.min(changedAt('dist/client/index.html'), changedAt('dist/server/index.js'));
  if (built < Math.max(...sources.map(newest))) {
    console.log('Building.');
    run('run', '--silent', 'build');
  }
}
