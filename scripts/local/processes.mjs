/**
 * Starting, recognising and ending processes.
 *
 * A process number alone names nothing: the system gives it to somebody else later. Every process noted on disk therefore
 * carries an identity (boot and start time), and only a process that still has that identity is ever ended.
 */
import { execFileSync, spawn } from 'node:child_process';
import { closeSync, mkdirSync, openSync, readFileSync, readSync, fstatSync } from 'node:fs';
import { createServer } from 'node:net';
import { dirname } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';

/** `{pid, identity}` of a living process, or `null` when there is none of that number. Zombies count as gone. */
export function identify(pid) {
  if (!Number.isInteger(pid) || pid <= 1) return null;
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The name in brackets may hold spaces and brackets; the fields are counted from behind the last one.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
    if (fields[0] === 'Z' || fields[0] === 'X') return null;
    const boot = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim();
    return { pid, identity: `${boot}:${fields[19]}` };
  } catch (error) {
    if (error.code !== 'ENOENT' && error.code !== 'ESRCH') throw error;
    if (process.platform === 'linux') return null;
  }
  try {
    const started = execFileSync('ps', ['-o', 'lstart=', '-p', String(pid)], { encoding: 'utf8' }).trim();
    return started ? { pid, identity: started } : null;
  } catch {
    return null;
  }
}

/** Whether the process noted as `{pid, identity}` is still that same process. */
export function isSame(noted) {
  return Boolean(noted) && identify(noted.pid)?.identity === noted.identity;
}

/** Sends a signal to the process's whole group where it leads one, else to it alone. Silent when it is gone. */
function signal(pid, name) {
  try {
    process.kill(-pid, name);
  } catch {
    try {
      process.kill(pid, name);
    } catch {
      // Gone between looking and signalling.
    }
  }
}

/**
 * Ends a noted process: asks, waits up to `patience` ms, then insists. Resolves when it is gone, and at once when the number
 * belongs to something else by now.
 */
export async function end(noted, { patience = 10_000, first = 'SIGTERM' } = {}) {
  if (!isSame(noted)) return;
  signal(noted.pid, first);
  const until = Date.now() + patience;
  while (isSame(noted) && Date.now() < until) await sleep(25);
  if (!isSame(noted)) return;
  signal(noted.pid, 'SIGKILL');
  for (let i = 0; i < 200 && isSame(noted); i += 1) await sleep(25);
}

/**
 * Starts a program in a session of its own, so that Ctrl-C reaches only the process that looks after it, which can then end
 * things in order. Output goes to `log` (appended, or started afresh with `fresh`), or to our own output when `log` is null.
 * `onNote` gets `{name, pid, identity}` at once, before anything is awaited, to be put on disk.
 */
export function launch({ name, command, args = [], cwd, env, log, fresh = true, onNote }) {
  let out = 'inherit';
  if (log) {
    mkdirSync(dirname(log), { recursive: true });
    out = openSync(log, fresh ? 'w' : 'a', 0o600);
  }
  let child;
  try {
    child = spawn(command, args, { cwd, env, detached: true, stdio: ['ignore', out, out] });
  } finally {
    if (log) closeSync(out);
  }
  const noted = child.pid ? identify(child.pid) : null;
  if (noted) onNote?.({ name, ...noted });
  const exited = new Promise((resolve) => {
    child.once('error', (error) => resolve({ code: null, signal: null, error }));
    child.once('exit', (code, sig) => resolve({ code, signal: sig }));
  });
  return { name, child, noted, exited, log };
}

/** The last lines of a log, at most `lines` and 8 kB; empty when there is none. */
export function tail(file, lines = 20) {
  let fd;
  try {
    fd = openSync(file, 'r');
  } catch {
    return '';
  }
  try {
    const { size } = fstatSync(fd);
    const length = Math.min(size, 8192);
    const buffer = Buffer.alloc(length);
    readSync(fd, buffer, 0, length, size - length);
    return buffer.toString('utf8').trimEnd().split('\n').slice(-lines).join('\n');
  } finally {
    closeSync(fd);
  }
}

/** Whether a port of 127.0.0.1 can be listened on now. Port 0 asks for any; resolves to the number or `null`. */
export function tryPort(port) {
  return new Promise((resolve) => {
    const server = createServer();
    server.unref();
    server.once('error', () => resolve(null));
    server.listen({ port, host: '127.0.0.1', exclusive: true }, () => {
      const { port: got } = server.address();
      server.close(() => resolve(got));
    });
  });
}

/** The first free port from `wanted` upwards (100 tried), else any free one. */
export async function freePort(wanted = 0, avoid = []) {
  if (wanted) {
    for (let port = wanted; port < wanted + 100 && port < 65_536; port += 1) {
      if (!avoid.includes(port) && (await tryPort(port))) return port;
    }
  }
  for (;;) {
    const port = await tryPort(0);
    if (port && !avoid.includes(port)) return port;
  }
}
