import { singleton } from './singleton';

/** Too widely known to protect anything, lower case: a ranked list of some fifty thousand. Read when first asked for. */
function list(): Promise<ReadonlySet<string>> {
  return singleton('common-passwords', async () => {
    const { dictionary } = await import('@zxcvbn-ts/language-common');
    return new Set(dictionary['passwords-common'].map((p) => p.toLowerCase()));
  });
}

/** Only what is told apart whatever the case, spaces and signs. */
function bare(text: string): string {
  return text.normalize('NFKC').toLowerCase().replace(/[^\p{L}\p{N}]/gu, '');
}

/** One short piece again and again, or a straight run up or down. */
function isPattern(text: string): boolean {
  for (let n = 1; n <= Math.min(4, text.length / 3); n++) {
    if (text === text.slice(0, n).repeat(Math.ceil(text.length / n)).slice(0, text.length)) return true;
  }
  const steps = [...text].slice(1).map((c, i) => c.codePointAt(0)! - [...text][i]!.codePointAt(0)!);
  const straight = (by: number) => steps.filter((s) => s === by).length >= steps.length - 1;
  return steps.length > 0 && (straight(1) || straight(-1));
}

/**
 * Why a password would be guessed, in words; null when nothing speaks against it. Follows NIST SP 800-63B: no rules about
 * kinds of characters, but nothing widely known, nothing that stands beside it, no mere pattern.
 *
 * @param own what stands beside it: the person's address and name
 */
export async function whyGuessed(password: string, own: readonly string[]): Promise<string | null> {
  const text = password.normalize('NFKC').toLowerCase();
  const plain = bare(password);
  if (isPattern(plain) || isPattern(text)) return 'This is only a pattern. Use a few words that don’t belong together.';
  const common = await list();
  const core = text.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '');
  if (common.has(text) || common.has(plain) || common.has(core)) return 'This password is widely known, so it is the first that others would try. Use a few words that don’t belong together.';
  const near = [...own, ...own.flatMap((o) => [o.split('@')[0]!, o.split('@')[1] ?? '']), ...own.flatMap((o) => o.split(/[\s@.]+/)), 'fairlead'].map(bare).filter((o) => o.length >= 3);
  const letters = bare(core);
  if (near.some((o) => o === plain || o === letters)) return 'This is too near to your address, your name or the name of this service. Use a few words that don’t belong together.';
  return null;
}
