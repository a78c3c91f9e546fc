/** Every route of the product with the access it declares, read from the route files themselves. */
import { readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { only, STAFF, type Access } from '~/server/access';
import type { Role } from '~/server/scope';
import { STREAMS } from '~/server/streams';

export interface Route {
  /** '/[org]/[tournament]/scores'. */
  pattern: string;
  method: string;
  kind: 'page' | 'endpoint' | 'stream';
  access: Access;
  file: string;
}

const pages = fileURLToPath(new URL('../../src/pages', import.meta.url));

function walk(folder: string): string[] {
  return readdirSync(folder).flatMap((name) => {
    const path = join(folder, name);
    return statSync(path).isDirectory() ? walk(path) : [path];
  });
}

/** The access rule written in a page or endpoint. @throws Error when there is none to be found */
function accessIn(text: string, file: string): Access {
  if (text === 'STAFF') return STAFF;
  const word = /^'(public|person|operator|signed)'$/.exec(text);
  if (word) return word[1] as Access;
  const roles = /^only\(([^)]*)\)$/.exec(text);
  if (roles) return only(...([...roles[1]!.matchAll(/'(\w+)'/g)].map((m) => m[1]) as Role[]));
  throw new Error(`${file}: can't read the access '${text}': write 'public', 'person', 'operator', 'signed', STAFF or only('role', …)`);
}

/** All routes, error pages left out. */
export function listRoutes(): Route[] {
  const routes: Route[] = STREAMS.map((s) => ({ pattern: s.route, method: 'GET', kind: 'stream', access: s.access, file: 'src/server/streams.ts' }));
  for (const file of walk(pages)) {
    const path = file.slice(pages.length).replace(/\.(astro|ts)$/, '').replace(/\/index$/, '') || '/';
    const text = readFileSync(file, 'utf8');
    if (file.endsWith('.astro')) {
      if (path === '/404' || path === '/500' || path === '/refused') continue;
      const found = /\brequire(?:Org|Tournament)?Page\(\s*Astro,\s*(STAFF|'\w+'|only\([^)]*\))/.exec(text);
      if (!found) throw new Error(`${path} declares no access`);
      routes.push({ pattern: path, method: 'GET', kind: 'page', access: accessIn(found[1]!.replace(/\s+/g, ' '), file), file });
    } else if (file.endsWith('.ts') && !file.endsWith('.test.ts')) {
      for (const m of text.matchAll(/export const (GET|POST|PUT|PATCH|DELETE)\b[^=]*=\s*endpoint\(\{([\s\S]*?)\n\}\)/g)) {
        const found = /access:\s*(STAFF|'\w+'|only\([^)]*\))/.exec(m[2]!);
        if (!found) throw new Error(`${path} ${m[1]} declares no access`);
        routes.push({ pattern: path, method: m[1]!, kind: 'endpoint', access: accessIn(found[1]!.replace(/\s+/g, ' '), file), file });
      }
      if (!routes.some((r) => r.file === file)) throw new Error(`${path}: no endpoint found`);
    }
  }
  return routes.sort((a, b) => a.pattern.localeCompare(b.pattern));
}
