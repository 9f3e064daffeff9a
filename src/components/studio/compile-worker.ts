import { compilePlan } from '#lib/plan/compile.ts';
import type { CompiledPlan, Problem } from '#lib/plan/types.ts';

export interface CompileRequest {
  id: number;
  source: string;
}
export interface CompileAnswer {
  id: number;
  plan: CompiledPlan | null;
  problems: Problem[];
}

// The page's own worker: compiling a long plan takes longer than a frame, and typing must not wait for it.
self.onmessage = (event: MessageEvent<CompileRequest>) => {
  const { id, source } = event.data;
  const answer: CompileAnswer = { id, ...compilePlan(source) };
  self.postMessage(answer);
};
