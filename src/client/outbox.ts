/**
 * What a device has kept and not yet handed over. A request is written down here first, with a key made on the device, and
 * leaves only when the server has answered: closing the tab, a flat battery or no network lose nothing, and a repeat of the same
 * key has no second effect. Only one tab sends at a time (Web Locks), in the order in which things were kept.
 *
 * Items belong to a person: on a shared tablet nobody sends what somebody else typed.
 */
import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import { ApiProblem, callApi } from './api';

/** One request that waits, or that the server refused and a person must look at. */
export interface OutboxItem {
  key: string;
  sequence: number;
  personId: string;
  url: string;
  /** Without key, device and sequence. */
  body: Record<string, unknown>;
  /** What it is about, for the page: 'S09, Run'. */
  label: string;
  keptAt: string;
  refusal: { code: string; detail: string; extra: Record<string, unknown> } | null;
}

/** What became of a request: the answer, or that it waits here, or the refusal. */
export type Sent<Answer> = { state: 'kept'; answer: Answer } | { state: 'waiting'; why: string } | { state: 'refused'; problem: ApiProblem };

interface Schema extends DBSchema {
  items: { key: string; value: OutboxItem };
  device: { key: 'id' | 'sequence'; value: string | number };
}

/** Where items are kept; in memory where the browser keeps nothing for this site. */
interface Store {
  put(item: OutboxItem): Promise<void>;
  remove(key: string): Promise<void>;
  all(): Promise<OutboxItem[]>;
  /** The device's id and its next sequence number. */
  next(): Promise<{ device: string; sequence: number }>;
  lasting: boolean;
}

function memoryStore(): Store {
  const items = new Map<string, OutboxItem>();
  const device = crypto.randomUUID();
  let sequence = 0;
  return {
    lasting: false,
    put: async (item) => void items.set(item.key, item),
    remove: async (key) => void items.delete(key),
    all: async () => [...items.values()],
    next: async () => ({ device, sequence: ++sequence }),
  };
}

function databaseStore(db: IDBPDatabase<Schema>): Store {
  return {
    lasting: true,
    put: async (item) => void (await db.put('items', item)),
    remove: (key) => db.delete('items', key),
    all: async () => (await db.getAll('items')).sort((a, b) => a.sequence - b.sequence),
    async next() {
      const tx = db.transaction('device', 'readwrite');
      const device = ((await tx.store.get('id')) as string | undefined) ?? crypto.randomUUID();
      const sequence = (((await tx.store.get('sequence')) as number | undefined) ?? 0) + 1;
      await tx.store.put(device, 'id');
      await tx.store.put(sequence, 'sequence');
      await tx.done;
      return { device, sequence };
    },
  };
}

async function openStore(): Promise<Store> {
  try {
    const db = await openDB<Schema>('fairlead-outbox', 1, {
      upgrade(database) {
        database.createObjectStore('items', { keyPath: 'key' });
        database.createObjectStore('device');
      },
    });
    return databaseStore(db);
  } catch {
    return memoryStore();
  }
}

/** Runs `work` in one tab at a time, where the browser has locks. */
async function alone<T>(work: () => Promise<T>): Promise<T> {
  const locks = (globalThis.navigator as Partial<Navigator>).locks;
  return locks ? ((await locks.request('fairlead-outbox', work)) as T) : work();
}

/** Refusals that say nothing about the request itself: it waits and is sent again. */
function passes(problem: ApiProblem): boolean {
  return problem.status === 0 || problem.status >= 500 || problem.status === 429 || problem.status === 401;
}

function whyWaiting(problem: ApiProblem): string {
  if (problem.status === 401) return 'You are signed out. It is kept on this device: sign in again and it is sent.';
  if (problem.status === 0) return 'No network. It is kept on this device and is sent as soon as there is one.';
  return 'The server can’t take it just now. It is kept on this device and is sent again.';
}

/** The outbox of one person on this device. Made once for a page. */
export class Outbox {
  readonly #personId: string;
  readonly #store: Promise<Store>;
  readonly #listeners = new Set<(items: OutboxItem[], lasting: boolean) => void>();
  readonly #settled = new Map<string, (sent: Sent<unknown>) => void>();
  #timer: ReturnType<typeof setTimeout> | null = null;
  #pause = 2_000;

  constructor(personId: string) {
    this.#personId = personId;
    this.#store = openStore();
    globalThis.addEventListener('online', () => void this.flush());
    void this.flush();
  }

  /** Be told what waits, now and whenever it changes. Returns a function that ends it. */
  subscribe(listener: (items: OutboxItem[], lasting: boolean) => void): () => void {
    this.#listeners.add(listener);
    void this.#tell();
    return () => this.#listeners.delete(listener);
  }

  async #mine(): Promise<OutboxItem[]> {
    return (await (await this.#store).all()).filter((item) => item.personId === this.#personId);
  }

  async #tell(): Promise<void> {
    const [items, store] = [await this.#mine(), await this.#store];
    for (const listener of this.#listeners) listener(items, store.lasting);
  }

  /**
   * Keep a request here, then try to send it. Resolves when the server has answered, or when it is plain that it must wait.
   * A refused request stays until `discard`.
   */
  async keep<Answer>(url: string, body: Record<string, unknown>, label: string): Promise<Sent<Answer> & { key: string }> {
    const store = await this.#store;
    const { device, sequence } = await store.next();
    const key = crypto.randomUUID();
    await store.put({ key, sequence, personId: this.#personId, url, body: { ...body, device }, label, keptAt: new Date().toISOString(), refusal: null });
    await this.#tell();
    const sent = new Promise<Sent<unknown>>((resolve) => this.#settled.set(key, resolve));
    void this.flush();
    return { ...((await sent) as Sent<Answer>), key };
  }

  /** Forget one item: its request is not wanted any more, or somebody decided otherwise. */
  async discard(key: string): Promise<void> {
    await (await this.#store).remove(key);
    await this.#tell();
  }

  /** Send what waits, oldest first. Stops at the first that can't be sent now, and tries again later. */
  async flush(): Promise<void> {
    if (this.#timer) clearTimeout(this.#timer);
    this.#timer = null;
    await alone(async () => {
      const store = await this.#store;
      for (const item of await this.#mine()) {
        if (item.refusal) continue;
        try {
          const answer = await callApi('POST', item.url, { ...item.body, key: item.key, sequence: item.sequence });
          await store.remove(item.key);
          this.#pause = 2_000;
          this.#done(item.key, { state: 'kept', answer });
        } catch (error) {
          const problem = error instanceof ApiProblem ? error : new ApiProblem({ status: 0, code: 'offline', title: '', detail: '' });
          if (passes(problem)) {
            for (const waiting of await this.#mine()) if (!waiting.refusal) this.#done(waiting.key, { state: 'waiting', why: whyWaiting(problem) });
            this.#timer = setTimeout(() => void this.flush(), this.#pause);
            this.#pause = Math.min(this.#pause * 2, 30_000);
            return;
          }
          await store.put({ ...item, refusal: { code: problem.code, detail: problem.detail, extra: problem.extra } });
          this.#done(item.key, { state: 'refused', problem });
        }
      }
    });
    await this.#tell();
  }

  #done(key: string, sent: Sent<unknown>): void {
    this.#settled.get(key)?.(sent);
    this.#settled.delete(key);
  }
}
