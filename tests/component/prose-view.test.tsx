import { render, screen } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { ProseView } from '#components/plan/ProseView.tsx';
import type { ResolvedProse } from '#lib/plan/types.ts';

const text = (words: string) => ({ node: 'text' as const, text: words });

describe('prose of a plan', () => {
  it('keeps words inside emphasis inside a paragraph', () => {
    const prose: ResolvedProse = [
      {
        node: 'paragraph',
        children: [text('Cut it '), { node: 'emphasis', children: [text('square')] }, text('.')],
      },
    ];
    const { container } = render(<ProseView prose={prose} units="mm" pictures={{}} />);
    expect(container.innerHTML).toBe('<p>Cut it <em>square</em>.</p>');
  });

  it('sets a length in the reader’s units, in inches with plain text for those who listen', () => {
    const prose: ResolvedProse = [
      { node: 'paragraph', children: [{ node: 'value', kind: 'length', value: 450_850_000, text: 'x' }] },
    ];
    render(<ProseView prose={prose} units="in" pictures={{}} />);
    // 450.85 mm are 17.75 in exactly.
    expect(screen.getByText('17 3/4"')).toBeDefined();
  });

  it('shows text that looks like markup as it was typed', () => {
    const { container } = render(
      <ProseView
        prose={[{ node: 'paragraph', children: [text('<script>alert(1)</script>')] }]}
        units="mm"
        pictures={{}}
      />,
    );
    expect(container.querySelector('script')).toBeNull();
    expect(container.textContent).toBe('<script>alert(1)</script>');
  });

  it('leaves out a picture that is not there', () => {
    const { container } = render(
      <ProseView prose={[{ node: 'picture', src: 'gone.png', alt: 'gone' }]} units="mm" pictures={{}} />,
    );
    expect(container.querySelector('img')).toBeNull();
  });
});
