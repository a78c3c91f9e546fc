/** Installing what is missing: npm packages from the lock file, Debian packages where we may. */
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { findPostgres } from './postgres.mjs';
import { LOGS, ROOT, shown } from './paths.mjs';
import { Trouble } from './trouble.mjs';

const STAMP = join(ROOT, 'node_modules/.fairlead-lock-hash');
const OLDEST_NODE = [20, 11];

/** Throws Trouble when this Node.js is too old to run the product. */
export function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor < OLDEST_NODE[1])) {
    throw new Trouble(`Fairlead needs Node.js ${OLDEST_NODE.join('.')} or later; this is ${process.versions.node}.`);
  }
}

function lockHash() {
  return createHash('sha256').update(readFileSync(join(ROOT, 'package-lock.json'))).digest('hex');
}

/** Whether what npm says it has installed is what the lock file asks for; optional packages may be for another system. */
function installedByHand() {
  try {
    const wanted = JSON.parse(readFileSync(join(ROOT, 'package-lock.json'), 'utf8')).packages;
    const there = JSON.parse(readFileSync(join(ROOT, 'node_modules/.package-lock.json'), 'utf8')).packages;
    return Object.entries(wanted).every(([path, entry]) =>
      path === '' || entry.optional || entry.devOptional || entry.link || there[path]?.version === entry.version);
  } catch {
    return false;
  }
}

/** Installs the npm packages unless they are what the lock file says. */
export async function installNpmPackages(session, progress) {
  const hash = lockHash();
  const known = existsSync(STAMP) ? readFileSync(STAMP, 'utf8').trim() : null;
  if (known === hash) return;
  if (!installedByHand()) {
    await progress.step('Installing npm packages', 'npm packages installed', () => session.run({
      name: 'npm', command: 'npm', args: ['ci', '--include=dev', '--no-audit', '--no-fund', '--loglevel=http'], cwd: ROOT, env: process.env,
      failed: `The npm packages could not be installed; see ${shown(join(LOGS, 'npm.log'))}.`,
    }));
  }
  writeFileSync(STAMP, `${hash}\n`);
}

/**
 * Installs a Debian package. Where we may not, throws Trouble with the command that does it.
 *
 * A package manager that is cut off leaves its database locked or half done, so it is left running when we are stopped, and
 * waited for when we come again.
 */
async function installDebianPackage(session, progress, name, what) {
  const command = `apt-get update && apt-get install -y ${name}`;
  if (!existsSync('/usr/bin/apt-get')) {
    throw new Trouble(`${what} is missing, and this is no Debian: install it and start again.`);
  }
  if (process.getuid?.() !== 0) {
    throw new Trouble(`${what} is missing. Install it with this command and start again:\n\n    sudo sh -c '${command}'`);
  }
  const options = '-o DPkg::Lock::Timeout=300 -o Acquire::Retries=2';
  await progress.step(`Installing ${what} from Debian’s packages`, `${what} installed`, () => session.run({
    name: `apt-${name}`, leave: true, cwd: '/',
    command: '/bin/sh',
    args: ['-c', `dpkg --configure -a; apt-get ${options} update && apt-get ${options} install -y --no-install-recommends ${name}`],
    env: { PATH: process.env.PATH, HOME: '/root', LC_ALL: 'C.UTF-8', DEBIAN_FRONTEND: 'noninteractive', ...proxies() },
    failed: `${what} could not be installed; see ${shown(join(LOGS, `apt-${name}.log`))}. Try it by hand: ${command}`,
  }));
}

function proxies() {
  return Object.fromEntries(Object.entries(process.env).filter(([key]) => /^(https?|ftp|no|all)_proxy$/i.test(key)));
}

/** PostgreSQL's programs (see `findPostgres`), installed if they are missing. */
export async function installPostgres(session, progress) {
  if (!findPostgres()) await installDebianPackage(session, progress, 'postgresql', 'PostgreSQL');
  const postgres = findPostgres();
  if (!postgres) throw new Trouble('PostgreSQL 15 or later is needed, and what Debian offers here is older.');
  return postgres;
}

/** The path of Debian's Chromium, installed if it is missing. CHROMIUM_PATH names another one. */
export async function installChromium(session, progress) {
  const path = process.env.CHROMIUM_PATH || '/usr/bin/chromium';
  if (existsSync(path)) return path;
  if (process.env.CHROMIUM_PATH) throw new Trouble(`CHROMIUM_PATH is ${path}, and there is nothing.`);
  await installDebianPackage(session, progress, 'chromium', 'Chromium');
  if (!existsSync(path)) throw new Trouble(`Chromium was installed, but it is not at ${path}.`);
  return path;
}
