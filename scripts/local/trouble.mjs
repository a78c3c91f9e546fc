/**
 * A failure whose message is meant for the person at the terminal: one sentence that says what is wrong and what to do.
 * `tail` is output of the program that failed, shown below the sentence. Anything else that is thrown is a defect of ours
 * and keeps its stack.
 */
export class Trouble extends Error {
  constructor(message, { tail = '' } = {}) {
    super(message);
    this.name = 'Trouble';
    this.tail = tail;
  }
}

/** Shows any error on stderr and sets the exit code to 1. */
export function report(error) {
  if (error instanceof Trouble) {
    const tail = error.tail.trimEnd();
    if (tail) console.error(`\n${tail.replace(/^/gm, '    ')}`);
    console.error(`\n${error.message}\n`);
  } else {
    console.error(error);
  }
  process.exitCode = 1;
}
