export interface StatusProps {
  text: string;
  tone?: 'plain' | 'ok' | 'wait' | 'bad' | undefined;
}

/** What became of it, told politely. Rendered from the start and empty, so that its first words are announced too. */
export function Status({ text, tone = 'plain' }: StatusProps) {
  return (
    <p className={tone === 'plain' ? 'status' : `status ${tone}`} role="status">
      {text}
    </p>
  );
}

/** 'Kept at 11:32', in the named zone, or in the one the page says it tells times in. */
export function keptAt(moment: Date, zone?: string): string {
  const pageZone = typeof document === 'undefined' ? undefined : document.documentElement.dataset['zone'];
  const timeZone = zone ?? pageZone;
  const time = new Intl.DateTimeFormat('en-GB', { hour: 'numeric', minute: '2-digit', ...(timeZone ? { timeZone } : {}) });
  return `Kept at ${time.format(moment)}`;
}
