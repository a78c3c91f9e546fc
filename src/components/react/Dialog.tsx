import { useEffect, useId, useRef, type ReactNode } from 'react';
import { Button } from './Button';

export interface DialogProps {
  isOpen: boolean;
  /** Escape, and whatever else means 'not now'. */
  onClose: () => void;
  title: string;
  children?: ReactNode;
  /** Buttons at the foot. */
  actions?: ReactNode;
}

/** A question above the page: the browser's own modal dialog keeps the focus inside and gives it back after. */
export function Dialog({ isOpen, onClose, title, children, actions }: DialogProps) {
  const box = useRef<HTMLDialogElement>(null);
  const titleId = useId();
  useEffect(() => {
    const dialog = box.current;
    if (!dialog) return;
    if (isOpen && !dialog.open) dialog.showModal();
    if (!isOpen && dialog.open) dialog.close();
  }, [isOpen]);
  return (
    <dialog
      ref={box}
      className="dialog"
      aria-labelledby={titleId}
      onCancel={(event) => {
        event.preventDefault();
        onClose();
      }}
      onClose={() => {
        if (isOpen) onClose();
      }}
    >
      {isOpen && (
        <div className="stack">
          <h2 id={titleId}>{title}</h2>
          {children}
          {actions && <div className="cluster">{actions}</div>}
        </div>
      )}
    </dialog>
  );
}

export interface ConfirmDialogProps extends Omit<DialogProps, 'actions'> {
  /** Words of the button that does it. */
  confirm: string;
  onConfirm: () => void;
  leave?: string | undefined;
  tone?: 'beam' | 'primary' | undefined;
  busy?: string | false | undefined;
}

/** Asks once before what can't be undone; the title names the thing. */
export function ConfirmDialog({ confirm, onConfirm, leave = 'Leave it as it is', tone = 'beam', busy, ...dialog }: ConfirmDialogProps) {
  return (
    <Dialog
      {...dialog}
      actions={
        <>
          <Button tone={tone} onPress={onConfirm} busy={busy}>
            {confirm}
          </Button>
          <Button onPress={dialog.onClose}>{leave}</Button>
        </>
      }
    />
  );
}
