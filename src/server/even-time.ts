/** A public form that may not tell who has an account answers no sooner than this, in milliseconds. */
const EVEN_MS = 250;

/** Run it so that the time it takes says nothing of what it found. What it throws comes as late as its answer. */
export async function inEvenTime<T>(work: () => Promise<T>): Promise<T> {
  const wait = new Promise((resolve) => setTimeout(resolve, EVEN_MS));
  try {
    return await work();
  } finally {
    await wait;
  }
}
