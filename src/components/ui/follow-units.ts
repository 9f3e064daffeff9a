import type { UnitSystem } from '#lib/units/length.ts';

function readUnits(link: Element): UnitSystem | null {
  const units = link.getAttribute('data-units');
  return units === 'mm' || units === 'in' ? units : null;
}

/**
 * Lets an island follow the units links of the title block without a new page: a plain click calls `onChange`, marks the
 * link in force and keeps the choice in the address, so that reloading and sharing agree with what is shown. A click that
 * would open a tab is left alone, and without JavaScript the links simply lead to the page in the other units.
 *
 * @returns stops following; give it back from the effect that began it
 */
export function followUnits(root: Document, onChange: (units: UnitSystem) => void): () => void {
  function onClick(event: MouseEvent): void {
    if (event.button !== 0 || event.metaKey || event.ctrlKey || event.shiftKey || event.altKey) return;
    const link = event.target instanceof Element ? event.target.closest('a[data-units]') : null;
    const units = link && readUnits(link);
    if (!link || !units) return;
    event.preventDefault();
    for (const other of root.querySelectorAll('a[data-units]')) {
      if (readUnits(other) === units) other.setAttribute('aria-current', 'true');
      else other.removeAttribute('aria-current');
    }
    const address = new URL(root.location.href);
    address.searchParams.set('units', units);
    root.defaultView?.history.replaceState(root.defaultView.history.state, '', address);
    onChange(units);
  }

  root.addEventListener('click', onClick);
  return () => root.removeEventListener('click', onClick);
}
