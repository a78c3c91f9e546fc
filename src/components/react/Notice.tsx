import type { ReactNode } from 'react';

export interface NoticeProps {
  tone?: 'info' | 'ok' | 'wait' | 'bad' | undefined;
  title?: string | undefined;
  children?: ReactNode;
  action?: ReactNode;
}

/** Something to know, with at most one thing to do about it. */
export function Notice({ tone = 'info', title, children, action }: NoticeProps) {
  return (
    <div className={tone === 'info' ? 'notice' : `notice ${tone}`}>
      <div className="min-w-0 max-w-[100ch]">
        {title && <b>{title} </b>}
        {children}
      </div>
      {action && <div>{action}</div>}
    </div>
  );
}
