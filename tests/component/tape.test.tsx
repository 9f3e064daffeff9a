import { cleanup, fireEvent, render, screen } from '@testing-library/react';
import { useState } from 'react';
import { renderToString } from 'react-dom/server';
import { afterEach, beforeAll, describe, expect, it } from 'vitest';
import { Tape } from '#components/ui/Tape.tsx';
import type { ExcludedStretch } from '#components/ui/tape-scale.ts';
import type { UnitSystem } from '#lib/units/length.ts';

const MM = 1_000_000;
const INCH = 25_400_000;

interface BenchProps {
  startNm: number;
  units?: UnitSystem;
  minNm?: number;
  maxNm?: number;
  excluded?: ExcludedStretch[];
  error?: string;
}

/** A page that keeps the value, as an island does, and remembers every value it was given. */
function renderTape({
  startNm,
  units = 'mm',
  minNm = 600 * MM,
  maxNm = 1200 * MM,
  excluded,
  error,
}: BenchProps) {
  const given: number[] = [];
  function Bench() {
    const [nm, setNm] = useState(startNm);
    return (
      <Tape
        label="Width"
        name="width"
        valueNm={nm}
        minNm={minNm}
        maxNm={maxNm}
        units={units}
        excluded={excluded}
        error={error}
        onChange={(next) => {
          given.push(next);
          setNm(next);
        }}
      />
    );
  }
  const { container } = render(<Bench />);
  return {
    given,
    container,
    slider: screen.getByRole('slider', { name: 'Width' }),
    field: screen.getByRole<HTMLInputElement>('textbox', { name: 'Width' }),
    status: () => screen.getByRole('status').textContent,
  };
}

function type(field: HTMLInputElement, text: string) {
  fireEvent.change(field, { target: { value: text } });
  fireEvent.keyDown(field, { key: 'Enter' });
}

beforeAll(() => {
  // jsdom draws nothing, so it has no pointer capture; the tape only needs it not to fail.
  Object.assign(Element.prototype, { setPointerCapture: () => undefined });
});
afterEach(cleanup);

describe('the tape under the keys', () => {
  it.each([
    ['ArrowRight', false, 1001],
    ['ArrowUp', false, 1001],
    ['ArrowLeft', false, 999],
    ['ArrowDown', false, 999],
    ['ArrowRight', true, 1010],
    ['ArrowLeft', true, 990],
    ['PageUp', false, 1010],
    ['PageDown', false, 990],
    ['Home', false, 600],
    ['End', false, 1200],
  ])('takes %s (Shift: %s) from 1000 mm to %d mm', (key, shiftKey, mm) => {
    const { given, slider } = renderTape({ startNm: 1000 * MM });
    fireEvent.keyDown(slider, { key, shiftKey });
    expect(given).toEqual([mm * MM]);
  });

  it('moves by sixteenths of an inch where the reader has inches', () => {
    const { given, slider } = renderTape({ startNm: 36 * INCH, units: 'in' });
    fireEvent.keyDown(slider, { key: 'ArrowRight' });
    fireEvent.keyDown(slider, { key: 'ArrowRight', shiftKey: true });
    expect(given).toEqual([36 * INCH + INCH / 16, 36 * INCH + (11 * INCH) / 16]);
  });

  it('goes from a value between two graduations to the one beside it', () => {
    // 1000.4 mm lies between 1000 and 1001.
    const right = renderTape({ startNm: 1_000_400_000 });
    fireEvent.keyDown(right.slider, { key: 'ArrowRight' });
    fireEvent.keyDown(right.slider, { key: 'ArrowLeft' });
    expect(right.given).toEqual([1001 * MM, 1000 * MM]);
    cleanup();
    const left = renderTape({ startNm: 1_000_400_000 });
    fireEvent.keyDown(left.slider, { key: 'ArrowLeft' });
    expect(left.given).toEqual([1000 * MM]);
  });

  it('stops at its limits', () => {
    const { given, slider } = renderTape({ startNm: 1195 * MM });
    fireEvent.keyDown(slider, { key: 'ArrowRight', shiftKey: true });
    fireEvent.keyDown(slider, { key: 'ArrowRight' });
    expect(given).toEqual([1200 * MM]);
  });

  it('leaves the browser its own keys', () => {
    const { given, slider } = renderTape({ startNm: 1000 * MM });
    expect(fireEvent.keyDown(slider, { key: 'ArrowLeft', altKey: true })).toBe(true);
    expect(fireEvent.keyDown(slider, { key: 'Tab' })).toBe(true);
    expect(fireEvent.keyDown(slider, { key: 'ArrowLeft' })).toBe(false);
    expect(given).toHaveLength(1);
  });
});

describe('the tape before a screen reader', () => {
  it('is a labelled slider that says its value in the reader’s units', () => {
    const { slider } = renderTape({
      startNm: 36 * INCH + INCH / 4,
      units: 'in',
      minNm: 24 * INCH,
      maxNm: 48 * INCH,
    });
    expect(slider.getAttribute('aria-valuetext')).toBe('36 1/4"');
    expect(slider.getAttribute('aria-valuenow')).toBe('36.25');
    expect(slider.getAttribute('aria-valuemin')).toBe('24');
    expect(slider.getAttribute('aria-valuemax')).toBe('48');
  });

  it('describes its limits and every excluded stretch with its reason', () => {
    const { slider } = renderTape({
      startNm: 1000 * MM,
      excluded: [{ fromNm: 700 * MM, toNm: 720 * MM, reason: 'no slide is made for it.' }],
    });
    const description = document.getElementById(slider.getAttribute('aria-describedby') ?? '');
    expect(description?.textContent).toContain('From 600 mm to 1200 mm.');
    expect(description?.textContent).toContain('Not 700 mm to 720 mm: no slide is made for it.');
  });
});

describe('an excluded stretch', () => {
  const excluded = [{ fromNm: 1001 * MM, toNm: 1020 * MM, reason: 'no slide is made for it.' }];

  it('is leapt over by the keys, and the reason is announced', () => {
    const { given, slider, status } = renderTape({ startNm: 1000 * MM, excluded });
    fireEvent.keyDown(slider, { key: 'ArrowRight' });
    expect(given).toEqual([1021 * MM]);
    expect(status()).toBe('Not 1001 mm to 1020 mm: no slide is made for it.');
    fireEvent.keyDown(slider, { key: 'ArrowLeft' });
    expect(given).toEqual([1021 * MM, 1000 * MM]);
  });

  it('that reaches the limit cannot be leapt: the tape stays, and says why', () => {
    const { given, slider, status } = renderTape({
      startNm: 1150 * MM,
      excluded: [{ fromNm: 1151 * MM, toNm: 1200 * MM, reason: 'the door would not open.' }],
    });
    fireEvent.keyDown(slider, { key: 'ArrowRight' });
    fireEvent.keyDown(slider, { key: 'End' });
    expect(given).toEqual([]);
    expect(status()).toBe('Not 1151 mm to 1200 mm: the door would not open.');
  });

  it('refuses what is typed into it, with the reason', () => {
    const { given, field, status } = renderTape({ startNm: 1000 * MM, excluded });
    type(field, '1010');
    expect(given).toEqual([]);
    expect(field.getAttribute('aria-invalid')).toBe('true');
    expect(field.value).toBe('1010');
    expect(status()).toBe('Not 1001 mm to 1020 mm: no slide is made for it.');
  });

  it('lets a drag out on the nearer side', () => {
    const { given, slider } = renderTape({ startNm: 990 * MM, excluded });
    // 4 px to the millimetre, and the blade is pulled to the left: 24 px further are 996, 80 px are 1010, 104 px are 1016.
    fireEvent.pointerDown(slider, { button: 0, clientX: 200, pointerId: 1 });
    fireEvent.pointerMove(slider, { clientX: 176, pointerId: 1 });
    fireEvent.pointerMove(slider, { clientX: 120, pointerId: 1 });
    fireEvent.pointerMove(slider, { clientX: 96, pointerId: 1 });
    expect(given).toEqual([996 * MM, 1000 * MM, 1021 * MM]);
  });
});

describe('the field of the tape', () => {
  it('reads a bare number in the reader’s units, and any unit that is written', () => {
    const { given, field } = renderTape({ startNm: 1000 * MM, units: 'in' });
    type(field, '40 3/8');
    type(field, '105 cm');
    expect(given).toEqual([40 * INCH + (3 * INCH) / 8, 1050 * MM]);
  });

  it('keeps a text that is no length, says what is wrong, and mends with the next good one', () => {
    const { given, field, status } = renderTape({ startNm: 1000 * MM });
    type(field, 'wide');
    expect(given).toEqual([]);
    expect(field.value).toBe('wide');
    expect(status()).toContain('“wide” is not a unit of length.');
    type(field, '900');
    expect(given).toEqual([900 * MM]);
    expect(field.getAttribute('aria-invalid')).toBeNull();
    expect(status()).toBe('');
  });

  it('refuses what lies outside the limits and names the limit', () => {
    const { given, field, status } = renderTape({ startNm: 1000 * MM });
    type(field, '599');
    expect(status()).toBe('The least is 600 mm.');
    type(field, '1201');
    expect(status()).toBe('The most is 1200 mm.');
    expect(given).toEqual([]);
  });

  it('names, in inches, only limits that it takes', () => {
    // 600 mm = 23.622 in and 1200 mm = 47.244 in: between 23 5/8 (600.08 mm) and 47 15/64 (1199.75 mm) in 64ths.
    const { given, field, status } = renderTape({ startNm: 1000 * MM, units: 'in' });
    type(field, '47 1/4');
    expect(status()).toBe('The most is 47 15/64".');
    type(field, '47 15/64');
    type(field, '23 5/8');
    expect(given).toEqual([47 * INCH + (15 * INCH) / 64, 23 * INCH + (5 * INCH) / 8]);
  });

  it('takes what was typed when it is left, and gives it up with Escape', () => {
    const { given, field } = renderTape({ startNm: 1000 * MM });
    fireEvent.change(field, { target: { value: '910' } });
    fireEvent.blur(field);
    fireEvent.change(field, { target: { value: '920' } });
    fireEvent.keyDown(field, { key: 'Escape' });
    fireEvent.blur(field);
    expect(given).toEqual([910 * MM]);
    expect(field.value).toBe('910 mm');
  });

  it('changes nothing when it is visited and left', () => {
    // 1000 mm are 39.37 in, which the field shows to the nearest sixteenth.
    const { given, field } = renderTape({ startNm: 1000 * MM, units: 'in' });
    fireEvent.focus(field);
    fireEvent.blur(field);
    expect(given).toEqual([]);
    expect(field.value).toBe('39 3/8"');
  });

  it('shows what the plan holds against the value', () => {
    const { field, status } = renderTape({
      startNm: 1000 * MM,
      error: 'The drawer would strike the skirting.',
    });
    expect(status()).toBe('The drawer would strike the skirting.');
    expect(field.getAttribute('aria-invalid')).toBe('true');
  });
});

describe('the tape in a plain form', () => {
  it('sends the exact length under its name, whatever the field shows', () => {
    const { container } = renderTape({ startNm: 1000 * MM, units: 'in' });
    const sent = [...container.querySelectorAll<HTMLInputElement>('[name="width"]')].map(
      ({ value }) => value,
    );
    // 1000 / 25.4 = 39.370078740…, in nine decimals of an inch, the last of which is a nought.
    expect(sent).toEqual(['39.37007874"']);
  });

  it('before its script runs, sends what stands in the field', () => {
    const html = renderToString(
      <Tape
        label="Width"
        name="width"
        valueNm={900 * MM}
        minNm={600 * MM}
        maxNm={1200 * MM}
        units="mm"
        onChange={() => undefined}
      />,
    );
    expect(html.match(/name="width"/g)).toHaveLength(1);
    expect(html).toMatch(/<input[^>]*type="text"[^>]*name="width"[^>]*value="900 mm"/);
  });

  it('needs no inline style, which the content security policy would refuse', () => {
    const { container } = renderTape({ startNm: 900 * MM });
    expect(container.querySelectorAll('[style]')).toHaveLength(0);
  });
});

describe('the pointer on the tape', () => {
  it('brings the graduation that was tapped under the index', () => {
    const { given, slider } = renderTape({ startNm: 1000 * MM });
    slider.getBoundingClientRect = () => new DOMRect(0, 0, 400, 72);
    fireEvent.pointerDown(slider, { button: 0, clientX: 240, pointerId: 1 });
    fireEvent.pointerUp(slider, { clientX: 241, pointerId: 1 });
    // 41 px right of the middle are 10.25 mm.
    expect(given).toEqual([1010 * MM]);
  });

  it('goes anywhere in the range by the line beneath', () => {
    const { given, container } = renderTape({ startNm: 1000 * MM });
    const range = container.querySelector('.tape__range');
    if (range === null) throw new Error('the range is not drawn');
    range.getBoundingClientRect = () => new DOMRect(0, 0, 300, 44);
    fireEvent.pointerDown(range, { clientX: 100, pointerId: 1, buttons: 1 });
    fireEvent.pointerMove(range, { clientX: 900, pointerId: 1, buttons: 1 });
    expect(given).toEqual([800 * MM, 1200 * MM]);
  });
});
