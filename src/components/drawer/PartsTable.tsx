import { ChangeBar } from '#components/ui/ChangeBar.tsx';
import { DataTable, FigureHead } from '#components/ui/DataTable.tsx';
import { Length } from '#components/ui/Length.tsx';
import { PartMark } from '#components/ui/PartMark.tsx';
import { lengthFormat } from '#lib/plan/length-format.ts';
import type { ResolvedMaterial, ResolvedPart, UnitSystem } from '#lib/plan/types.ts';
import { formatAlike, REMAINDER_LEGEND } from '#lib/units/format-length.ts';

interface PartsTableProps {
  parts: readonly ResolvedPart[];
  materials: readonly ResolvedMaterial[];
  units: UnitSystem;
}

/** Every part with its finished sizes, length by width by thickness; a figure that has just changed is marked in the margin. */
export function PartsTable({ parts, materials, units }: PartsTableProps) {
  const labels = new Map(materials.map((material) => [material.name, material.label]));
  const unit = units === 'in' ? 'in' : 'mm';
  // Read together, as in the book, so that parts that must match are printed alike on both.
  const shown = formatAlike(
    parts.flatMap((part) => [part.length, part.width, part.thickness]),
    lengthFormat(units),
  );
  const size = (index: number, head: string) => {
    const length = shown[index];
    return (
      <td className="is-figure" data-head={head}>
        {length ? <Length length={length} isBare /> : null}
      </td>
    );
  };
  return (
    <>
      <DataTable caption="Parts table">
        <thead>
          <tr>
            <th scope="col" className="is-narrow">
              Mark
            </th>
            <th scope="col">Part</th>
            <th scope="col">Material</th>
            <th scope="col" className="is-figure">
              Qty
            </th>
            {['Length', 'Width', 'Thickness'].map((head) => (
              <FigureHead key={head} unit={unit}>
                {head}
              </FigureHead>
            ))}
          </tr>
        </thead>
        <tbody>
          {parts.map((part, index) => (
            <tr key={part.mark} data-mark={part.mark}>
              <td className="is-narrow change-bar-place">
                <ChangeBar of={`${part.qty} ${part.length} ${part.width} ${part.thickness}`} />
                <PartMark mark={part.mark} name={part.name} />
              </td>
              <td>{part.name}</td>
              <td>{labels.get(part.material) ?? part.material}</td>
              <td className="is-figure">{part.qty}</td>
              {size(index * 3, 'Length')}
              {size(index * 3 + 1, 'Width')}
              {size(index * 3 + 2, 'Thickness')}
            </tr>
          ))}
        </tbody>
      </DataTable>
      {shown.some((length) => length.marked) ? <p className="small secondary">{REMAINDER_LEGEND}</p> : null}
    </>
  );
}
