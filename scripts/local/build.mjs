/** Which sources a build was made from, so that a start rebuilds when they have changed and only then. */
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { ROOT } from './paths.mjs';

const SOURCES = ['src', 'public', 'package-lock.json', 'astro.config.mjs', 'tsconfig.json', 'drizzle/meta/_journal.json', 'scripts/build.mjs'];

/** One hash over every file that a build reads, names and contents. Unit tests lie beside the code and are left out. */
export function sourcesHash() {
  const hash = createHash('sha256');
  for (const source of SOURCES) {
    const path = join(ROOT, source);
    if (!existsSync(path)) continue;
    const files = source.includes('.')
      ? [path]
      : readdirSync(path, { recursive: true, withFileTypes: true })
        .filter((entry) => entry.isFile() && !/\.test\.tsx?$/.test(entry.name))
        .map((entry) => join(entry.parentPath ?? entry.path, entry.name))
        .sort();
    for (const file of files) {
      const content = readFileSync(file);
      hash.update(`${file.slice(ROOT.length)}\0${content.length}\0`).update(content);
    }
  }
  return hash.digest('hex');
}

/** The folder a build goes to, absolute. */
export function outDir() {
  return resolve(ROOT, process.env.FAIRLEAD_OUT_DIR || 'dist');
}

const stamp = (folder) => join(folder, 'build.stamp');

/** Whether the folder holds a finished build of exactly these sources. */
export function isBuilt(folder, hash) {
  return existsSync(join(folder, 'main.mjs')) && existsSync(stamp(folder)) && readFileSync(stamp(folder), 'utf8').trim() === hash;
}

/** Marks a build as begun (`null`) or as finished from the sources of that hash. */
export function markBuilt(folder, hash) {
  if (hash) writeFileSync(stamp(folder), `${hash}\n`);
  else rmSync(stamp(folder), { force: true });
}
