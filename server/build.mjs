import { cpSync } from 'node:fs';
import { build } from 'esbuild';

// The server as two entries: the web side and the arm process. Packages stay outside.
const folder = process.argv[2] ?? 'dist';
await build({
  entryPoints: { index: 'server/index.ts', 'arm-process': 'server/control/arm-process.ts' },
  outdir: `${folder}/server`,
  bundle: true,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  packages: 'external',
  splitting: true,
  sourcemap: true,
  logLevel: 'warning',
});
cpSync('drizzle', `${folder}/drizzle`, { recursive: true });
