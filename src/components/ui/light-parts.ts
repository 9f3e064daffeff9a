/**
 * Lights a part everywhere on the page while any of its marks is pointed at or has the focus. Works on whatever carries
 * `data-mark`: marks in text, rows of a table, shapes of a drawing, whether a component or the server drew them.
 */
export function lightParts(root: Document): void {
  let lit = '';

  function light(mark: string): void {
    if (mark === lit) return;
    lit = mark;
    for (const element of root.querySelectorAll('[data-mark]')) {
      element.toggleAttribute('data-lit', mark !== '' && element.getAttribute('data-mark') === mark);
    }
  }

  function lightFrom(event: Event): void {
    const marked = event.target instanceof Element ? event.target.closest('[data-mark]') : null;
    light(marked?.getAttribute('data-mark') ?? '');
  }

  root.addEventListener('pointerover', lightFrom);
  root.addEventListener('focusin', lightFrom);
  root.addEventListener('focusout', () => light(''));
}
