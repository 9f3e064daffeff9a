import type { ReactNode } from 'react';
import { noticeSigns, noticeTitles, type NoticeKind } from './notice-kinds.ts';

interface NoticeProps {
  kind: NoticeKind;
  /** What it is about, in a few words; the kind's own word otherwise. */
  title?: string;
  children?: ReactNode;
}

/**
 * A notice inside an island. An `error` is announced at once; put the others into a `role="status"` region of the
 * island when they come and go. Twin of sheet/Notice.astro.
 */
export function Notice({ kind, title = noticeTitles[kind], children }: NoticeProps) {
  const sign = noticeSigns[kind];
  return (
    <div className={`notice notice--${kind}`} role={kind === 'error' ? 'alert' : 'note'}>
      <svg className="notice__sign" viewBox="0 0 20 20" aria-hidden="true">
        <path className="notice__fill" d={sign.outline} fill="none" stroke="currentColor" strokeWidth="1.5" />
        <path
          className="notice__stroke-on-fill"
          d={sign.strokes}
          fill="none"
          stroke="currentColor"
          strokeWidth="2"
        />
      </svg>
      <div>
        <p className="notice__title">{title}</p>
        {children === undefined ? null : <div className="notice__body">{children}</div>}
      </div>
    </div>
  );
}
