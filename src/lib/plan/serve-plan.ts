import * as z from 'zod';

import { compilePlan } from './compile.ts';
import type { Compilation } from './compile.ts';
import { provePlan } from './prove.ts';
import type { ProofOutcome } from './prove.ts';

/** What the page asks of the worker: check a text, prove a text, or stop the proof with that id. */
export type PlanRequest =
  | { type: 'compile'; id: number; text: string }
  | { type: 'prove'; id: number; text: string; seed: number; maxTries: number; units: 'mm' | 'in' }
  | { type: 'stop'; id: number };

/** What the worker answers; `outcome` is null where the text does not compile. */
export type PlanAnswer =
  | { type: 'compiled'; id: number; compilation: Compilation }
  | { type: 'progress'; id: number; progress: number }
  | { type: 'proved'; id: number; outcome: ProofOutcome | null };

/** The part of a worker's scope or a message port that serving needs; alike in browsers and Node. */
export interface PlanPort {
  postMessage: (answer: PlanAnswer) => void;
  addEventListener: (type: 'message', listener: (event: { data: unknown }) => void) => void;
}

const requestSchema = z.discriminatedUnion('type', [
  z.object({ type: z.literal('compile'), id: z.number(), text: z.string() }),
  z.object({
    type: z.literal('prove'),
    id: z.number(),
    text: z.string(),
    seed: z.number().int(),
    maxTries: z.number().int().min(1).max(1_000_000),
    units: z.enum(['mm', 'in']),
  }),
  z.object({ type: z.literal('stop'), id: z.number() }),
]);

/** How long a proof runs before it listens again, in milliseconds. */
const SLICE_MS = 40;

/**
 * Serves compiling and proving over a port, so that a page never waits for either. A proof runs in slices and listens
 * between them; a second proof with the same id, or a stop, ends the first, which then answers with what it found.
 */
export function servePlan(port: PlanPort): void {
  /** The latest run of each id; an older one sees that it is no longer it and ends. */
  const running = new Map<number, symbol>();

  const prove = (request: Extract<PlanRequest, { type: 'prove' }>): void => {
    const { id, text, seed, maxTries, units } = request;
    const { plan } = compilePlan(text);
    if (!plan) {
      port.postMessage({ type: 'proved', id, outcome: null });
      return;
    }
    const run = Symbol('run');
    running.set(id, run);
    const proof = provePlan(plan, { seed, maxTries, units, shouldStop: () => running.get(id) !== run });
    const goOn = (): void => {
      const start = performance.now();
      let step = proof.next();
      while (!step.done && performance.now() - start < SLICE_MS) step = proof.next();
      if (step.done) {
        if (running.get(id) === run) running.delete(id);
        port.postMessage({ type: 'proved', id, outcome: step.value });
        return;
      }
      port.postMessage({ type: 'progress', id, progress: step.value.progress });
      setTimeout(goOn, 0);
    };
    goOn();
  };

  port.addEventListener('message', ({ data }) => {
    const read = requestSchema.safeParse(data);
    if (!read.success) return;
    const request = read.data;
    if (request.type === 'compile') {
      port.postMessage({ type: 'compiled', id: request.id, compilation: compilePlan(request.text) });
    } else if (request.type === 'prove') prove(request);
    else running.delete(request.id);
  });
}
