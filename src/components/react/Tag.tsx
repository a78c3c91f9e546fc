import type { ReactNode } from 'react';

export interface TagProps {
  tone?: 'plain' | 'ok' | 'wait' | 'bad' | 'info' | 'asked' | undefined;
  children: ReactNode;
}

/** A state in words. The tone only repeats what the word says. */
export function Tag({ tone = 'plain', children }: TagProps) {
  return <span className={tone === 'plain' ? 'tag' : `tag ${tone}`}>{children}</span>;
}
