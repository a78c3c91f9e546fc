/**
 * What the linter can't see: which files a feature may have, that no route escapes its access
 * declaration, and that nothing has a catch-all name. Prints what is wrong; exit 1 if anything is.
 */
import { readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const wrong: string[] = [];

function walk(folder: string): string[] {
  return readdirSync(join(root, folder)).flatMap((name) => {
    const path = join(folder, name);
    return statSync(join(root, path)).isDirectory() ? walk(path) : [path];
  });
}

/** The closed list: a feature's files and what each is for. To add a kind, add it here with its reason. */
const FEATURE_FILES: [RegExp, string][] = [
  [/^tables\.ts$/, 'Drizzle tables'],
  [/^schema\.ts$/, 'Zod, shared with the browser'],
  [/^types\.ts$/, 'types'],
  [/^policy\.ts$/, 'who may'],
  [/^queries\.ts$/, 'reads; need a scope'],
  [/^assembly\.ts$/, 'pure: puts together what several queries give, so that it can be tested and measured by itself'],
  [/^loaders\.ts$/, 'what a page shows'],
  [/^jobs\.ts$/, 'queue handlers'],
  [/^constants\.ts$/, 'constants'],
  [/^commands\/[a-z]+(-[a-z]+)*\.ts$/, 'one change each'],
  [/^emails\/[a-z]+(-[a-z]+)*\.tsx$/, 'mails'],
  [/^components\/[A-Za-z]+\.(astro|tsx)$/, 'islands and parts of pages'],
  [/^components\/[a-z]+(-[a-z]+)*\.tsx?$/, 'what several components share: hooks, renderers'],
];

for (const file of walk('src/features')) {
  const [, , feature, ...rest] = file.split('/');
  const inside = rest.join('/');
  const plain = inside.replace(/(\.dom)?\.test\.(tsx?)$/, '.$2');
  if (!FEATURE_FILES.some(([pattern]) => pattern.test(plain))) wrong.push(`${file}: not one of the files a feature (${feature}) may have`);
}

for (const file of ['src', 'tests', 'seed', 'fakes', 'scripts'].flatMap(walk)) {
  const name = file.split('/').at(-1)!;
  if (/^(utils?|helpers?|misc|common)\.[a-z]+$/.test(name)) wrong.push(`${file}: say what it is about`);
  if (/^index\.tsx?$/.test(name) && !file.startsWith('src/pages/')) wrong.push(`${file}: no barrels`);
}

for (const file of walk('src/pages')) {
  const text = readFileSync(join(root, file), 'utf8');
  if (file.endsWith('.astro')) {
    const isError = /^src\/pages\/(404|500|refused)\.astro$/.test(file);
    if (!isError && !/\brequire(Org|Tournament)?Page\(Astro,/.test(text)) wrong.push(`${file}: declares no access (requirePage)`);
    if (/export const prerender = true/.test(text)) wrong.push(`${file}: is prerendered; headers and access would not hold`);
    if (/define:vars|transition:|server:defer/.test(text)) wrong.push(`${file}: uses a directive with a known hole (define:vars, transition:*, server:defer)`);
  } else if (file.endsWith('.ts') && !file.endsWith('.test.ts')) {
    const methods = [...text.matchAll(/export const (GET|POST|PUT|PATCH|DELETE|ALL)\b([^=]*)=\s*([\w.]+)/g)];
    if (methods.length === 0) wrong.push(`${file}: exports no method`);
    for (const m of methods) if (m[3] !== 'endpoint') wrong.push(`${file}: ${m[1]} is not made with endpoint()`);
  }
}

for (const file of walk('src').filter((f) => /\.(astro|tsx)$/.test(f) && !f.endsWith('.test.tsx') && !f.includes('/emails/'))) {
  const text = readFileSync(join(root, file), 'utf8');
  if (/\sstyle=[{"']/.test(text)) wrong.push(`${file}: a style attribute; the content security policy refuses it`);
  if (/dangerouslySetInnerHTML/.test(text)) wrong.push(`${file}: dangerouslySetInnerHTML`);
}

for (const line of wrong) console.error(line);
console.log(wrong.length === 0 ? 'structure: as it should be' : `structure: ${wrong.length} wrong`);
process.exit(wrong.length === 0 ? 0 : 1);
