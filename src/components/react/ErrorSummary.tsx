import { useEffect, useRef } from 'react';

export interface ErrorSummaryProps {
  /** `id` is that of the control the message is about. */
  errors: readonly { id?: string | undefined; message: string }[];
  title?: string | undefined;
  /** Takes the focus whenever this changes: count the tries. */
  focusKey?: string | number | undefined;
}

/** What was refused, at the top, in the words that stand beside the fields. Prefixes the document's title while it shows. */
export function ErrorSummary({ errors, title = 'There is a problem', focusKey }: ErrorSummaryProps) {
  const box = useRef<HTMLDivElement>(null);
  const shown = errors.length > 0;
  useEffect(() => {
    if (!shown) return undefined;
    const before = document.title;
    if (!before.startsWith('Error: ')) document.title = `Error: ${before}`;
    return () => {
      document.title = document.title.replace(/^Error: /, '');
    };
  }, [shown]);
  useEffect(() => {
    if (shown) box.current?.focus();
  }, [shown, focusKey]);
  if (!shown) return null;
  return (
    <div className="error-summary" role="alert" tabIndex={-1} ref={box}>
      <h2>{title}</h2>
      <ul>
        {errors.map(({ id, message }) => (
          <li key={`${id ?? ''}${message}`}>
            {id ? (
              <a
                href={`#${id}`}
                onClick={(event) => {
                  event.preventDefault();
                  document.getElementById(id)?.focus();
                }}
              >
                {message}
              </a>
            ) : (
              message
            )}
          </li>
        ))}
      </ul>
    </div>
  );
}
