import { useRef } from 'react';

/** A short list put in order with two buttons a line; works by touch, keyboard and screen reader alike. */
export function OrderForm<Key extends string>(props: {
  label: string;
  hint: string;
  order: readonly Key[];
  words: (key: Key) => string;
  onChange: (order: Key[]) => void;
  error?: string | undefined;
  path: string;
  isDisabled: boolean;
}) {
  const list = useRef<HTMLOListElement>(null);
  const move = (i: number, by: -1 | 1) => {
    const order = [...props.order];
    const [key] = order.splice(i, 1);
    order.splice(i + by, 0, key!);
    props.onChange(order);
    // The focus stays with the line that moved.
    requestAnimationFrame(() => {
      const buttons = [...(list.current?.querySelectorAll<HTMLButtonElement>(`[data-at="${i + by}"]:not(:disabled)`) ?? [])];
      (buttons.find((b) => b.dataset['by'] === String(by)) ?? buttons[0])?.focus();
    });
  };
  return (
    <fieldset className="field" disabled={props.isDisabled} id={props.path} tabIndex={-1}>
      <legend className="label">{props.label}</legend>
      <p className="hint">{props.hint}</p>
      {props.error && <p className="field-error">{props.error}</p>}
      <ol className="lines" ref={list}>
        {props.order.map((key, i) => (
          <li key={key} className="flex items-center justify-between gap-3 py-1">
            <span>
              <span className="num muted">{i + 1}. </span>
              {props.words(key)}
            </span>
            <span className="flex gap-1">
              <button type="button" className="btn small" data-at={i} data-by="-1" disabled={i === 0} aria-label={`Up: ${props.words(key)}`} onClick={() => move(i, -1)}>
                Up
              </button>
              <button
                type="button"
                className="btn small"
                data-at={i}
                data-by="1"
                disabled={i === props.order.length - 1}
                aria-label={`Down: ${props.words(key)}`}
                onClick={() => move(i, 1)}
              >
                Down
              </button>
            </span>
          </li>
        ))}
      </ol>
    </fieldset>
  );
}
