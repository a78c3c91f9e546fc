export interface ProgressProps {
  /** How far, out of `max`; unknown when left out. */
  value?: number | undefined;
  max?: number | undefined;
  /** What is going on, in words that also show. */
  label: string;
}

/** A long job's state. It never moves by itself: an unknown end is said, not animated. */
export function Progress({ value, max = 1, label }: ProgressProps) {
  return (
    <label className="field">
      <span className="small muted">{label}</span>
      <progress className="progress" max={max} {...(value === undefined ? {} : { value })} />
    </label>
  );
}
