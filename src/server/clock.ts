import { singleton } from './singleton';

/** Where 'now' comes from. Tests put their own in. */
export interface Clock {
  now(): Date;
}

const holder = singleton<{ clock: Clock }>('clock', () => ({ clock: { now: () => new Date() } }));

/** The present moment. */
export function now(): Date {
  return holder.clock.now();
}

/** Replace the clock (tests only). Returns a function that puts the former one back. */
export function useClock(clock: Clock): () => void {
  const before = holder.clock;
  holder.clock = clock;
  return () => {
    holder.clock = before;
  };
}
