/** What is kept of a range proof with its revision. */
export interface ProofRecord {
  state: 'waiting' | 'running' | 'holds' | 'fails' | 'stopped';
  /** Which text was tried: a proof of an earlier text proves nothing of this one. */
  sourceHash: string;
  progress: number;
  /** Sentences: what was proved by bounds, what was only tried and how often, what fails and at which sizes. */
  proved: string[];
  tried: string[];
  failures: string[];
  ranAt: string;
}
