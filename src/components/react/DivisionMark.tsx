export interface DivisionMarkProps {
  shape: 'round' | 'square';
  letter: string;
  name: string;
}

/** A division as a shape and a letter, with its name for those who do not see it. */
export function DivisionMark({ shape, letter, name }: DivisionMarkProps) {
  return (
    <span className={`division ${shape}`} title={name}>
      <span aria-hidden="true">{letter}</span>
      <span className="sr-only">{name}</span>
    </span>
  );
}
