import { describe, expect, it } from 'vitest';
import { layOut } from '#lib/stock/lay-out.ts';
import { verifyLayout } from '#lib/stock/verify-layout.ts';
import { readBenchSet } from '#tests/bench/stock-instances.ts';

/**
 * Stock layout against published figures: the two-dimensional bin-packing classes of Berkey and Wang (1987) and Martello and
 * Vigo (1998), with the best known three-stage guillotine values and bounds as kept by the open packingsolver project (MIT).
 */

describe('the published classes', () => {
  const instances = readBenchSet('classes');

  it.each(['turned', 'fixed'])(
    'are laid out soundly, never below the published bound, within 3 %% of the best known (%s)',
    (way) => {
      let sheets = 0;
      let best = 0;
      for (const instance of instances.filter(({ group }) => group === way)) {
        const layout = layOut(instance.problem, { steps: 200 });
        expect(verifyLayout(instance.problem, layout), instance.name).toEqual([]);
        expect(layout.newCost, instance.name).toBeGreaterThanOrEqual(instance.bound);
        expect(layout.lowerBound, instance.name).toBeLessThanOrEqual(instance.best);
        sheets += layout.newCost;
        best += instance.best;
      }
      expect(sheets / best).toBeLessThan(1.03);
    },
  );
});
