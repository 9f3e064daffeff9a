import { Elevation } from '#components/plan/Elevation.tsx';
import { DataTable } from '#components/ui/DataTable.tsx';
import { Length } from '#components/ui/Length.tsx';
import { Money } from '#components/ui/Money.tsx';
import type { PublicFigures } from '#lib/plan/public-figures.ts';
import type { UnitSystem } from '#lib/plan/types.ts';
import { formatLength } from '#lib/units/format-length.ts';
import { formatArea, formatMass, formatNumber, formatRun } from '#lib/units/format-measure.ts';

interface PublicResultsProps {
  figures: PublicFigures;
  units: UnitSystem;
}

const PIECE = { sheet: ['sheet', 'sheets'], board: ['board', 'boards'], bar: ['bar', 'bars'] } as const;

function total(material: PublicFigures['materials'][number], units: UnitSystem): string {
  if (material.kind === 'sheet') return formatArea(material.areaM2 ?? 0, units);
  if (material.kind === 'bar') return formatRun(material.lengthM ?? 0, units);
  return `${formatNumber(material.boardFeet ?? 0, 1)} board feet`;
}

/** What a plan takes at these sizes, as far as it may be known before paying. */
export function PublicResults({ figures, units }: PublicResultsProps) {
  return (
    <>
      {figures.overall ? <Elevation overall={figures.overall} units={units} /> : null}
      <DataTable caption="Stock it takes" asRows>
        <thead>
          <tr>
            <th scope="col">Material</th>
            <th scope="col" className="is-figure">
              Thickness
            </th>
            <th scope="col" className="is-figure">
              In all
            </th>
            <th scope="col" className="is-figure">
              At least
            </th>
            <th scope="col" className="is-figure">
              Estimate
            </th>
          </tr>
        </thead>
        <tbody>
          {figures.materials.map((material) => (
            <tr key={material.name}>
              <td data-head="Material">{material.label}</td>
              <td data-head="Thickness" className="is-figure">
                <Length length={formatLength(material.nominal, { units, denominator: 32, decimals: 0.1 })} />
              </td>
              <td data-head="In all" className="is-figure">
                {total(material, units)}
              </td>
              <td data-head="At least" className="is-figure">
                {material.leastStock} {PIECE[material.kind][material.leastStock === 1 ? 0 : 1]}
              </td>
              <td data-head="Estimate" className="is-figure">
                {material.costMinor !== undefined && material.price ? (
                  <Money minor={material.costMinor} currency={material.price.currency} />
                ) : (
                  '–'
                )}
              </td>
            </tr>
          ))}
          {figures.hardware.map((item) => (
            <tr key={item.name}>
              <td data-head="Hardware" colSpan={2}>
                {item.name}
              </td>
              <td data-head="In all" className="is-figure">
                {item.qty} {item.unit ?? ''}
              </td>
              <td data-head="To buy" className="is-figure">
                {item.pack ? `${item.packs} × ${item.pack}` : item.packs}
              </td>
              <td data-head="Estimate" className="is-figure">
                {item.costMinor !== undefined && item.currency ? (
                  <Money minor={item.costMinor} currency={item.currency} />
                ) : (
                  '–'
                )}
              </td>
            </tr>
          ))}
          {figures.consumables.map((item) => (
            <tr key={item.name}>
              <td data-head="Consumable" colSpan={2}>
                {item.name}
              </td>
              <td data-head="In all" className="is-figure">
                {formatNumber(item.amount, 2)} {item.unit}
              </td>
              <td data-head="Coats" className="is-figure">
                {item.coats === 1 ? '1 coat' : `${item.coats} coats`}
              </td>
              <td data-head="Estimate" className="is-figure">
                {item.costMinor !== undefined && item.currency ? (
                  <Money minor={item.costMinor} currency={item.currency} />
                ) : (
                  '–'
                )}
              </td>
            </tr>
          ))}
        </tbody>
        <tfoot>
          {figures.costs.map((cost) => (
            <tr key={cost.currency}>
              <th scope="row" colSpan={4}>
                Estimated cost of stock and hardware
              </th>
              <td className="is-figure">
                <Money minor={cost.minor} currency={cost.currency} />
              </td>
            </tr>
          ))}
        </tfoot>
      </DataTable>
      <p className="small secondary">
        {figures.massKg === undefined ? '' : `The piece weighs about ${formatMass(figures.massKg, units)}. `}
        Prices are the author's; what is sold near you may cost more or less.
      </p>
    </>
  );
}
