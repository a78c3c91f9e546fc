import { useId, useState, type DragEvent } from 'react';
import { describedByIds, FieldShell } from './FieldShell';

export interface FileDropProps {
  label: string;
  /** As HTML has it: '.csv,text/csv'. A dropped file is not checked against it. */
  accept?: string | undefined;
  onFile: (file: File) => void;
  hint?: string | undefined;
  error?: string | undefined;
  /** The file taken last. */
  fileName?: string | undefined;
  isDisabled?: boolean | undefined;
  id?: string | undefined;
}

/** Choose a file or drop one. The same file can be chosen again after it was changed. */
export function FileDrop(props: FileDropProps) {
  const made = useId();
  const id = props.id ?? made;
  const [over, setOver] = useState(false);
  const drag = (inside: boolean) => (event: DragEvent) => {
    event.preventDefault();
    setOver(inside && props.isDisabled !== true);
  };
  return (
    <FieldShell id={id} label={props.label} hint={props.hint} error={props.error}>
      <div
        className={over ? 'drop over' : 'drop'}
        onDragEnter={drag(true)}
        onDragOver={drag(true)}
        onDragLeave={drag(false)}
        onDrop={(event) => {
          drag(false)(event);
          const file = event.dataTransfer.files[0];
          if (file && props.isDisabled !== true) props.onFile(file);
        }}
      >
        <input
          type="file"
          id={id}
          accept={props.accept}
          disabled={props.isDisabled}
          aria-invalid={props.error ? true : undefined}
          aria-describedby={describedByIds(id, props)}
          onChange={(event) => {
            const file = event.target.files?.[0];
            event.target.value = '';
            if (file) props.onFile(file);
          }}
        />
        <p className="hint">{props.fileName ? `${props.fileName} is in.` : 'Choose a file, or drop one here.'}</p>
      </div>
    </FieldShell>
  );
}
