import type { Copy } from '#db/models/index.ts';

/** A copy as its holder sees it: no keys, no hashes. */
export interface CopyView {
  id: string;
  number: number;
  state: 'queued' | 'making' | 'ready' | 'failed';
  /** 0 to 100, and in words what is being done. */
  progress: number;
  stage: string;
  failure: string | null;
  units: 'mm' | 'in';
  paper: 'a4' | 'letter';
  revisionLetter: string;
  values: Record<string, number | string>;
  pages: number | null;
  bytes: number | null;
  createdAt: string;
  readyAt: string | null;
}

/** The plain view of a row, with its revision's letter where that was loaded. */
export function viewCopy(copy: Copy): CopyView {
  return {
    id: copy.id,
    number: copy.number,
    state: copy.state,
    progress: copy.progress,
    stage: copy.stage,
    failure: copy.failure,
    units: copy.units,
    paper: copy.paper,
    revisionLetter: copy.revision?.letter ?? '',
    values: copy.fit.values,
    pages: copy.pages,
    bytes: copy.bytes,
    createdAt: copy.createdAt.toISOString(),
    readyAt: copy.readyAt?.toISOString() ?? null,
  };
}
