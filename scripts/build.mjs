/**
 * Builds what runs in production into `dist` (or FAIRLEAD_OUT_DIR): the pages and islands by Astro, the server's entry by
 * esbuild, and beside every text file for the browser its compressed copies, so that no request waits for a compressor.
 */
import { spawn } from 'node:child_process';
import { readFileSync, readdirSync, statSync, utimesSync, writeFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { promisify } from 'node:util';
import { brotliCompress, constants, gzip } from 'node:zlib';
import { isBuilt, markBuilt, outDir, sourcesHash } from './local/build.mjs';
import { ROOT } from './local/paths.mjs';
import { Trouble, report } from './local/trouble.mjs';

const TEXT = /\.(css|js|mjs|json|svg|txt|html|xml|webmanifest|ico|wasm|map)$/;
/** A compressed copy that saves less than this is not worth the lookup. */
const LEAST_SAVED = 100;

function astroBuild() {
  return new Promise((resolve, reject) => {
    const child = spawn(process.execPath, [join(ROOT, 'node_modules/astro/astro.js'), 'build'], {
      cwd: ROOT, stdio: 'inherit', env: { ...process.env, NODE_ENV: 'production', ASTRO_TELEMETRY_DISABLED: '1' },
    });
    child.once('error', reject);
    child.once('exit', (code) => (code === 0 ? resolve() : reject(new Trouble('The pages could not be built; what is wrong stands above.'))));
  });
}

async function bundleServer(folder) {
  const { build } = await import('esbuild');
  const migrations = JSON.parse(readFileSync(join(ROOT, 'drizzle/meta/_journal.json'), 'utf8')).entries.length;
  try {
    await build({
      absWorkingDir: ROOT,
      entryPoints: ['src/server/main.ts'],
      outfile: join(folder, 'main.mjs'),
      bundle: true,
      platform: 'node',
      target: 'node20',
      format: 'esm',
      packages: 'external',
      alias: { '~': join(ROOT, 'src') },
      jsx: 'automatic',
      sourcemap: 'linked',
      legalComments: 'none',
      define: { __MIGRATIONS__: String(migrations) },
    });
  } catch (error) {
    // esbuild has printed what is wrong, with the lines.
    throw Array.isArray(error.errors) ? new Trouble('The server could not be bundled; what is wrong stands above.') : error;
  }
}

async function precompress(folder) {
  const files = readdirSync(folder, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && TEXT.test(entry.name))
    .map((entry) => join(entry.parentPath ?? entry.path, entry.name));
  const compressors = [
    ['br', (bytes) => promisify(brotliCompress)(bytes, { params: { [constants.BROTLI_PARAM_QUALITY]: 11, [constants.BROTLI_PARAM_SIZE_HINT]: bytes.length } })],
    ['gz', (bytes) => promisify(gzip)(bytes, { level: 9 })],
  ];
  await Promise.all(files.map(async (file) => {
    const bytes = readFileSync(file);
    const { atime, mtime } = statSync(file);
    for (const [ending, compress] of compressors) {
      const small = await compress(bytes);
      if (bytes.length - small.length < LEAST_SAVED) continue;
      writeFileSync(`${file}.${ending}`, small);
      utimesSync(`${file}.${ending}`, atime, mtime);
    }
  }));
  return files.length;
}

async function main() {
  const folder = outDir();
  const hash = sourcesHash();
  if (process.argv.includes('--if-changed') && isBuilt(folder, hash)) return;
  markBuilt(folder, null);
  await astroBuild();
  await bundleServer(folder);
  const count = await precompress(join(folder, 'client'));
  // Sources that changed while we were at it are not in this build, whatever the hash says: it was taken first.
  markBuilt(folder, hash);
  console.log(`Built into ${relative(ROOT, folder) || folder}, ${count} text files compressed.`);
}

await main().catch(report);
