import { readFileSync } from 'node:fs';

import { describe, expect, it } from 'vitest';

import { servePlan } from '#lib/plan/serve-plan.ts';
import type { PlanAnswer, PlanRequest } from '#lib/plan/serve-plan.ts';

const text = readFileSync(new URL('./fixtures/example-plan.mdx', import.meta.url), 'utf8');

/** A port whose other end is this test. */
function connect(): {
  ask: (request: PlanRequest | string) => void;
  answers: PlanAnswer[];
  until: (type: PlanAnswer['type']) => Promise<PlanAnswer>;
} {
  const answers: PlanAnswer[] = [];
  const waiting: ((answer: PlanAnswer) => void)[] = [];
  let listen: (event: { data: unknown }) => void = () => undefined;
  servePlan({
    postMessage: (answer) => {
      answers.push(answer);
      for (const tell of waiting) tell(answer);
    },
    addEventListener: (_, listener) => {
      listen = listener;
    },
  });
  const until = (type: PlanAnswer['type']): Promise<PlanAnswer> =>
    new Promise((resolve) => {
      waiting.push((answer) => {
        if (answer.type === type) resolve(answer);
      });
    });
  return { ask: (request) => listen({ data: request }), answers, until };
}

describe('a worker that serves plans', () => {
  it('compiles a text', () => {
    const { ask, answers } = connect();
    ask({ type: 'compile', id: 1, text: '{nothing}' });
    expect(answers).toMatchObject([{ type: 'compiled', id: 1, compilation: { plan: null } }]);
  });

  it('proves a text in slices and tells its progress', async () => {
    const { ask, answers, until } = connect();
    const proved = until('proved');
    ask({ type: 'prove', id: 2, text, seed: 1, maxTries: 3000, units: 'mm' });
    expect(await proved).toMatchObject({ id: 2, outcome: { holds: true, tries: 3000 } });
    expect(answers.filter((answer) => answer.type === 'progress').length).toBeGreaterThan(0);
  });

  it('stops when it is told to, and answers with what it found', async () => {
    const { ask, until } = connect();
    const [progress, proved] = [until('progress'), until('proved')];
    ask({ type: 'prove', id: 3, text, seed: 1, maxTries: 1_000_000, units: 'mm' });
    await progress;
    ask({ type: 'stop', id: 3 });
    expect(await proved).toMatchObject({ id: 3, outcome: { holds: false, wasStopped: true } });
  });

  it('answers a text that does not compile with no outcome, and ignores what is no request', () => {
    const { ask, answers } = connect();
    ask('nonsense');
    ask({ type: 'prove', id: 4, text: '{', seed: 1, maxTries: 10, units: 'mm' });
    expect(answers).toEqual([{ type: 'proved', id: 4, outcome: null }]);
  });
});
