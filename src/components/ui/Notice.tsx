import type { ReactNode } from 'react';

export interface NoticeProps {
  /** A problem is announced at once, something done politely; information stays quiet. */
  kind: 'problem' | 'done' | 'info';
  title?: ReactNode;
  children?: ReactNode;
  id?: string;
}

const ROLE = { problem: 'alert', done: 'status', info: undefined } as const;

/** A few sentences that stand out from the page: what happened, why, what to do. */
export function Notice({ kind, title, children, id }: NoticeProps) {
  return (
    <div className={`notice notice-${kind}`} role={ROLE[kind]} id={id}>
      {title && <p className="font-[650]">{title}</p>}
      {children && <div>{children}</div>}
    </div>
  );
}
