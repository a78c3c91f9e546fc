/**
 * Tells the terminal what goes on: a line with its time for everything that is done, and what is being done now with the
 * seconds going up. Where the output is no terminal, long work is named when it has taken two seconds and every half minute.
 */
const seconds = (ms) => `${(ms / 1000).toFixed(1)} s`.padStart(8);

const lower = (text) => text[0].toLowerCase() + text.slice(1);

export class Progress {
  #active = new Map();
  #ticker;
  #live = process.stdout.isTTY && !process.env.CI;
  began = Date.now();

  /** Runs `work` under a description. `done` (text, or a function of the result) is printed with the time it took. */
  async step(doing, done, work) {
    const key = Symbol(doing);
    this.#active.set(key, { doing, since: Date.now(), told: 0 });
    this.#tick();
    this.#ticker ??= setInterval(() => this.#tick(), this.#live ? 200 : 500);
    this.#ticker.unref();
    try {
      const result = await work();
      const text = typeof done === 'function' ? done(result) : done;
      if (text) this.line(text, Date.now() - this.#active.get(key).since);
      return result;
    } finally {
      this.#active.delete(key);
      if (this.#active.size === 0) {
        clearInterval(this.#ticker);
        this.#ticker = undefined;
      }
      this.#clear();
    }
  }

  /** A line of its own, with how long it took if that is known. */
  line(text, ms) {
    this.#clear();
    console.log(`${ms === undefined ? ' '.repeat(8) : seconds(ms)}  ${text}`);
  }

  /** Free text, such as the addresses at the end. */
  say(text) {
    this.#clear();
    console.log(text);
  }

  #clear() {
    if (this.#live) process.stdout.write('\r\u001b[K');
  }

  #tick() {
    const now = Date.now();
    if (this.#live) {
      const oldest = [...this.#active.values()][0];
      if (!oldest) return;
      const names = [...this.#active.values()].map(({ doing }, i) => (i ? lower(doing) : doing)).join(', ');
      const room = (process.stdout.columns || 80) - 12;
      this.#clear();
      process.stdout.write(`${seconds(now - oldest.since)}  ${names.length > room ? `${names.slice(0, room - 1)}…` : names}`);
      return;
    }
    for (const step of this.#active.values()) {
      const taken = now - step.since;
      if (taken > 2000 && now - step.told > 30_000) {
        console.log(`${step.told ? seconds(taken) : ' '.repeat(8)}  ${step.told ? `Still ${lower(step.doing)}` : step.doing} …`);
        step.told = now;
      }
    }
  }
}

/** Rows as aligned columns with a heading and a line below it. `columns` is a list of `[key, heading]`. */
export function table(rows, columns) {
  const text = (row, key) => String(row[key] ?? '');
  const widths = columns.map(([key, heading]) => Math.max(heading.length, ...rows.map((row) => [...text(row, key)].length)));
  const line = (cells) => `  ${cells.map((cell, i) => cell + ' '.repeat(widths[i] - [...cell].length)).join('  ')}`.trimEnd();
  return [
    line(columns.map(([, heading]) => heading)),
    line(widths.map((width) => '─'.repeat(width))),
    ...rows.map((row) => line(columns.map(([key]) => text(row, key)))),
  ].join('\n');
}
