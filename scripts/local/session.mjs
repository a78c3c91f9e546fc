/**
 * One run of a command that starts things (`start`, `test`): at most one at a time per checkout, and everything it starts is
 * noted on disk before anything else happens. A run that was killed is found by its notes at the next one, which ends what is
 * left of it.
 */
import { existsSync, linkSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { LOCAL, LOGS } from './paths.mjs';
import { end, identify, isSame, launch, tail } from './processes.mjs';
import { Trouble } from './trouble.mjs';

function readJson(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
}

function writeJson(file, value) {
  const temporary = `${file}.${process.pid}`;
  writeFileSync(temporary, JSON.stringify(value), { mode: 0o600 });
  renameSync(temporary, file);
}

/**
 * The npm (and its shell) that we were started by. They are the terminal's hold on us: when they are killed, nobody is left who
 * could press Ctrl-C, and we stop as well. Empty when npm has no part in it, or where /proc is missing; `null` when npm was
 * killed before we looked.
 */
function launchers() {
  if (!process.env.npm_lifecycle_event || !existsSync('/proc/self/stat')) return [];
  const found = [];
  let pid = process.ppid;
  for (let i = 0; i < 2; i += 1) {
    let command;
    let parent;
    try {
      command = readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').join(' ').trim();
      const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
      parent = Number(stat.slice(stat.lastIndexOf(')') + 2).split(' ')[1]);
    } catch {
      return null;
    }
    const isNpm = /\bnpm(-cli\.js)?\b/.test(command);
    if (pid === 1 || /^\S*\bsystemd\b/.test(command)) return isNpm ? found : null;
    if (!isNpm && !/^\S*sh -c /.test(command)) return found;
    const noted = identify(pid);
    if (!noted) return null;
    found.push(noted);
    if (isNpm) return found;
    pid = parent;
  }
  return found;
}

export class Session {
  #name;
  #lock;
  #notesFile;
  #notes = { children: [] };
  #running = new Set();
  #launchers = [];
  #watch;
  #over = false;
  #released = false;

  constructor(name) {
    this.#name = name;
    this.#lock = join(LOCAL, `${name}.lock`);
    this.#notesFile = join(LOCAL, `${name}.run.json`);
  }

  /**
   * Takes the lock. Gives `null` when it is ours, or the notes of the run that holds it: `{pid, …what it described}`. A holder
   * whose npm was killed is told to stop and waited for. Throws Trouble when it is our own npm that was killed.
   */
  async take() {
    const by = launchers();
    if (!by) throw new Trouble('Stopped.');
    this.#launchers = by;
    mkdirSync(LOCAL, { recursive: true });
    const mine = `${this.#lock}.${process.pid}`;
    writeFileSync(mine, JSON.stringify({ ...identify(process.pid), launchers: this.#launchers }), { mode: 0o600 });
    try {
      for (;;) {
        try {
          // A link is made whole or not at all, which makes this the lock.
          linkSync(mine, this.#lock);
          return null;
        } catch (error) {
          if (error.code !== 'EEXIST') throw error;
        }
        const holder = readJson(this.#lock);
        if (holder && isSame(holder)) {
          if (holder.launchers?.every(isSame) ?? true) return { ...readJson(this.#notesFile), pid: holder.pid };
          await end(holder, { patience: 30_000 });
          continue;
        }
        // The holder is dead. Whoever moves its lock away first goes on; a lock that was taken meanwhile is put back.
        const dead = `${mine}.dead`;
        try {
          renameSync(this.#lock, dead);
        } catch (error) {
          if (error.code !== 'ENOENT') throw error;
          continue;
        }
        const moved = readJson(dead);
        if (moved && isSame(moved)) {
          try {
            linkSync(dead, this.#lock);
          } catch {
            // Taken once more; the next round finds out.
          }
        }
        rmSync(dead, { force: true });
        await sleep(10);
      }
    } finally {
      rmSync(mine, { force: true });
    }
  }

  /** Ends what a killed run left, newest first, and gives that run's notes (`{}` if there are none). */
  async clearLeftovers() {
    const left = readJson(this.#notesFile) ?? {};
    for (const child of [...(left.children ?? [])].reverse()) if (!child.leave) await end(child);
    this.#notes = { children: [] };
    this.#write();
    return left;
  }

  #write() {
    if (!this.#released) writeJson(this.#notesFile, this.#notes);
  }

  /** Adds to the notes, for the next run and for a second one beside this. */
  describe(more) {
    Object.assign(this.#notes, more);
    this.#write();
  }

  /**
   * Starts a program with its output in `.local/logs/<name>.log`; see `launch`. With `leave` it is never ended from here
   * (a package manager must not be cut off). With `show` the output goes to the terminal instead.
   */
  launch({ name, command, args, cwd, env, fresh, show = false, log = show ? null : join(LOGS, `${name}.log`), leave = false }) {
    if (this.#over) throw new Trouble('Stopped.');
    const running = launch({
      name, command, args, cwd, env, fresh, log,
      onNote: (noted) => {
        this.#notes.children.push(leave ? { ...noted, leave } : noted);
        this.#write();
      },
    });
    running.leave = leave;
    this.#running.add(running);
    void running.exited.then(() => {
      this.#running.delete(running);
      this.#notes.children = this.#notes.children.filter((child) => child.pid !== running.noted?.pid);
      this.#write();
    });
    return running;
  }

  /** Runs a program to its end. Throws Trouble with `failed` and the tail of its output unless it exits with 0. */
  async run({ failed, lines, ...options }) {
    const running = this.launch(options);
    const { code, error } = await running.exited;
    if (this.#over) throw new Trouble('Stopped.');
    if (code !== 0) throw new Trouble(error ? `${failed} (${error.message})` : failed, { tail: running.log ? tail(running.log, lines) : '' });
    return running;
  }

  /**
   * Calls `stop(reason)` once, at the first signal to stop or when the npm that started us is gone. A second signal some time
   * after the first kills all that is left. npm repeats the terminal's signal, hence 'some time'.
   */
  onStop(stop) {
    let asked = 0;
    const first = (reason) => {
      asked = Date.now();
      clearInterval(this.#watch);
      void stop(reason);
    };
    for (const name of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
      process.on(name, () => {
        if (!asked) first(name);
        else if (Date.now() - asked > 1500) this.killAll();
      });
    }
    if (this.#launchers.length) {
      this.#watch = setInterval(() => {
        if (!asked && !this.#launchers.every(isSame)) first('gone');
      }, 500);
      this.#watch.unref();
    }
    // A terminal that went away must not end us in the middle of stopping.
    process.stdout.on('error', () => {});
    process.stderr.on('error', () => {});
  }

  /** The last resort; leaves the notes for the next run. */
  killAll() {
    for (const { noted, leave } of this.#running) {
      if (leave || !noted) continue;
      try {
        process.kill(-noted.pid, 'SIGKILL');
      } catch {
        // Gone already.
      }
    }
    process.exit(130);
  }

  /** Ends everything still running, newest first: asks, waits up to `patience` ms, insists. Nothing can be started after. */
  async end({ patience = 25_000 } = {}) {
    this.#over = true;
    clearInterval(this.#watch);
    for (const { noted, leave, exited } of [...this.#running].reverse()) {
      if (leave) continue;
      await end(noted, { patience });
      await exited;
    }
  }

  /** Gives the lock back and drops the notes. */
  release() {
    this.#over = true;
    this.#released = true;
    clearInterval(this.#watch);
    rmSync(this.#notesFile, { force: true });
    rmSync(this.#lock, { force: true });
  }

  get name() {
    return this.#name;
  }
}
