import { cleanup, fireEvent, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { ChangeBar } from '#components/ui/ChangeBar.tsx';
import { ChoiceField } from '#components/ui/ChoiceField.tsx';
import { followUnits } from '#components/ui/follow-units.ts';
import { lightParts } from '#components/ui/light-parts.ts';
import { Money } from '#components/ui/Money.tsx';
import { Notice } from '#components/ui/Notice.tsx';
import { PartMark } from '#components/ui/PartMark.tsx';
import { ProgressBar } from '#components/ui/ProgressBar.tsx';
import { UnitsSwitch } from '#components/ui/UnitsSwitch.tsx';

afterEach(cleanup);

describe('the change bar', () => {
  const bars = (container: HTMLElement) => container.querySelectorAll('.change-bar').length;

  it('does not show on the first drawing, nor when nothing changed', () => {
    const { container, rerender } = render(<ChangeBar of="450 mm" />);
    rerender(<ChangeBar of="450 mm" />);
    expect(bars(container)).toBe(0);
  });

  it('shows once a figure changes, and is drawn anew at each further change', () => {
    const { container, rerender } = render(<ChangeBar of="450 mm" />);
    rerender(<ChangeBar of="451 mm" />);
    const first = container.querySelector('.change-bar');
    expect(first).not.toBeNull();
    rerender(<ChangeBar of="452 mm" />);
    expect(bars(container)).toBe(1);
    expect(container.querySelector('.change-bar')).not.toBe(first);
  });
});

describe('the units switch', () => {
  it('says which units are in force and asks only for the others', () => {
    const onChange = vi.fn();
    render(<UnitsSwitch units="in" onChange={onChange} />);
    expect(screen.getByRole('button', { name: 'Inches', pressed: true })).toBeTruthy();
    fireEvent.click(screen.getByRole('button', { name: 'Inches' }));
    expect(onChange).not.toHaveBeenCalled();
    fireEvent.click(screen.getByRole('button', { name: 'Millimetres' }));
    expect(onChange).toHaveBeenCalledExactlyOnceWith('mm');
  });
});

describe('the units links of the title block', () => {
  function renderLinks() {
    render(
      <>
        <a href="?width=900&units=in" data-units="in" aria-current="true">
          in
        </a>
        <a href="?width=900&units=mm" data-units="mm">
          mm
        </a>
      </>,
    );
  }

  it('are followed in place: the island is told, the link marked, the address kept', () => {
    window.history.replaceState(null, '', '/plans/alcove-chest?width=900&units=in');
    renderLinks();
    const onChange = vi.fn();
    const stop = followUnits(document, onChange);
    expect(fireEvent.click(screen.getByText('mm'))).toBe(false);
    expect(onChange).toHaveBeenCalledExactlyOnceWith('mm');
    expect(screen.getByText('mm').getAttribute('aria-current')).toBe('true');
    expect(screen.getByText('in').hasAttribute('aria-current')).toBe(false);
    expect(window.location.search).toBe('?width=900&units=mm');
    stop();
  });

  it('keep their own meaning for a click that opens a tab, and once nobody follows', () => {
    renderLinks();
    const onChange = vi.fn();
    const stop = followUnits(document, onChange);
    fireEvent.click(screen.getByText('mm'), { ctrlKey: true });
    stop();
    fireEvent.click(screen.getByText('mm'), { shiftKey: true });
    expect(onChange).not.toHaveBeenCalled();
  });
});

describe('the choice field', () => {
  it('is a named group of radio buttons, each with its note, and hands over the value taken', () => {
    const onChange = vi.fn();
    render(
      <ChoiceField
        legend="Slides"
        name="slide"
        value="450"
        options={[
          { value: '450', label: '450 mm' },
          { value: '500', label: '500 mm' },
          { value: '550', label: '550 mm', note: 'Deeper than the alcove', isDisabled: true },
        ]}
        onChange={onChange}
        error="Choose a slide that is made."
      />,
    );
    const group = screen.getByRole('group', { name: 'Slides' });
    expect(document.getElementById(group.getAttribute('aria-describedby') ?? '')?.textContent).toBe(
      'Choose a slide that is made.',
    );
    expect(screen.getByRole<HTMLInputElement>('radio', { name: '450 mm' }).checked).toBe(true);
    fireEvent.click(screen.getByRole('radio', { name: '500 mm' }));
    expect(onChange).toHaveBeenCalledExactlyOnceWith('500');
    expect(screen.getByRole<HTMLInputElement>('radio', { name: /550 mm.*Deeper/ }).disabled).toBe(true);
  });
});

describe('notices and progress', () => {
  it('announces an error at once and names every kind in words', () => {
    render(<Notice kind="error">The slides are longer than the side.</Notice>);
    expect(screen.getByRole('alert').textContent).toBe('Not in orderThe slides are longer than the side.');
    render(<Notice kind="holds" title="It fits your wall" />);
    expect(screen.getByRole('note').textContent).toBe('It fits your wall');
  });

  it('shows how far the work is, and no figure while that is not known', () => {
    const { rerender } = render(<ProgressBar label="Setting page 4 of 12" done={1 / 3} />);
    expect(screen.getByRole('progressbar', { name: 'Setting page 4 of 12' }).getAttribute('value')).toBe(
      '33',
    );
    rerender(<ProgressBar label="Waiting for its turn" />);
    expect(screen.getByRole('progressbar').hasAttribute('value')).toBe(false);
    expect(screen.getByRole('status').textContent).toBe('Waiting for its turn');
  });

  it('keeps the text of an amount whole although its points are drawn closer', () => {
    const { container } = render(<Money minor={123450} currency="EUR" />);
    expect(container.textContent).toBe('€1,234.50');
    expect(container.querySelectorAll('.point')).toHaveLength(2);
  });
});

describe('a part mark', () => {
  it('lights its part everywhere while it is pointed at, and nothing else', () => {
    render(
      <>
        <PartMark mark="A" name="Side" />
        <table>
          <tbody>
            <tr data-mark="A">
              <td>Side</td>
            </tr>
            <tr data-mark="B">
              <td>Top</td>
            </tr>
          </tbody>
        </table>
        <p>Elsewhere</p>
      </>,
    );
    lightParts(document);
    const lit = () => [...document.querySelectorAll('[data-lit]')].map((element) => element.tagName);
    fireEvent.pointerOver(screen.getByTitle('Side'));
    expect(lit()).toEqual(['SPAN', 'TR']);
    fireEvent.pointerOver(screen.getByText('Top'));
    expect(lit()).toEqual(['TR']);
    fireEvent.pointerOver(screen.getByText('Elsewhere'));
    expect(lit()).toEqual([]);
  });
});
