/**
 * One value per process, whichever bundle asks first.
 *
 * The page bundle and the server's own entry are built separately and each gets its own copy of
 * every module, so anything that must exist once (the pool, the job queue, live listeners) is kept
 * on `globalThis` under a registered symbol.
 */
export function singleton<T>(name: string, make: () => T): T {
  const key = Symbol.for(`fairlead.${name}`);
  const store = globalThis as unknown as Record<symbol, T | undefined>;
  const existing = store[key];
  if (existing !== undefined) return existing;
  const made = make();
  store[key] = made;
  return made;
}
