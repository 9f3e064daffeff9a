import type { ReactNode } from 'react';

interface DataTableProps {
  /** What the table holds; also names its scrolling region. */
  caption: string;
  /** True where a heading right above says the same: the caption is then only read out. */
  isCaptionUnseen?: boolean;
  /** On a phone each row becomes a small list; every cell then says its head in `data-head`. */
  asRows?: boolean;
  /** The writer's own `thead`, `tbody` and `tfoot`. */
  children: ReactNode;
}

/** A ruled table inside an island; classes as in sheet/DataTable.astro, its twin. */
export function DataTable({ caption, isCaptionUnseen = false, asRows = false, children }: DataTableProps) {
  return (
    <div className="table-scroll" tabIndex={0} role="region" aria-label={caption}>
      <table className={asRows ? 'data-table data-table--rows' : 'data-table'}>
        <caption className={isCaptionUnseen ? 'unseen' : undefined}>{caption}</caption>
        {children}
      </table>
    </div>
  );
}

interface FigureHeadProps {
  children: ReactNode;
  /** Unit of the whole column, set small beneath the head. */
  unit?: string;
}

/** The head of a column of figures, with the unit that its cells then leave out. */
export function FigureHead({ children, unit }: FigureHeadProps) {
  return (
    <th scope="col" className="is-figure">
      {children}
      {unit === undefined ? null : <span className="data-table__unit">{unit}</span>}
    </th>
  );
}
