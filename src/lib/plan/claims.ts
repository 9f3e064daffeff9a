import { MAX_PIECES } from './resolve-parts.ts';
import type {
  CompiledPlan,
  Expression,
  MaterialDeclaration,
  PartDeclaration,
  ShapeDeclaration,
} from './types.ts';

/** What a claim is about; each is told apart in the proof's sentences. */
export type ClaimTopic = 'sizes' | 'quantities' | 'stock' | 'shapes';

/** Something that must hold at every allowed fit: a yes-or-no expression over the plan's own names. */
export interface Claim {
  topic: ClaimTopic;
  /** The part's mark. */
  mark: string;
  that: Expression;
  /** An expression that must also be a whole number. */
  whole?: Expression;
}

const NM = (value: number): Expression => ({ op: 'value', kind: 'length', value });

function compare(left: Expression, sign: string, right: Expression): Expression {
  return { op: 'binary', kind: 'yesno', sign, left, right };
}

function all(claims: readonly Expression[]): Expression {
  return claims.reduce((left, right) => ({ op: 'binary', kind: 'yesno', sign: '&&', left, right }));
}

function any(claims: readonly Expression[]): Expression {
  return claims.reduce((left, right) => ({ op: 'binary', kind: 'yesno', sign: '||', left, right }));
}

function sum(left: Expression, right: Expression): Expression {
  return { op: 'binary', kind: 'length', sign: '+', left, right };
}

function measure(mark: string, member: 'length' | 'width' | 'thickness'): Expression {
  return { op: 'member', kind: 'length', of: 'part', name: mark, member };
}

/** A claim that is owed only where its part (or shape) is there. */
function where(when: Expression | undefined, that: Expression): Expression {
  return when === undefined
    ? that
    : {
        op: 'if',
        kind: 'yesno',
        test: when,
        then: that,
        otherwise: { op: 'value', kind: 'yesno', value: true },
      };
}

/** The stock claim, where the stock sizes are written out as lists; null where they are hidden behind a name. */
function stockClaim(part: PartDeclaration, material: MaterialDeclaration): Expression | null {
  const list = material.sizes?.expression;
  if (list?.op !== 'list') return null;
  const [length, width] = [measure(part.mark, 'length'), measure(part.mark, 'width')];
  const grain = material.grain === 'none' ? 'none' : (part.grain ?? 'length');
  const isAcross = material.grain !== 'none' && (grain === 'width') !== (material.grain === 'width');
  const isFree = material.kind === 'sheet' && grain === 'none';
  const options: Expression[] = [];
  for (const size of list.items) {
    const [stockLength, stockWidth] = size.op === 'list' ? size.items : [size];
    if (!stockLength) return null;
    const fits = (run: Expression, across: Expression): Expression => {
      const along = compare(run, '<=', stockLength);
      // A board's width is no limit: wider parts are glued up.
      return stockWidth && material.kind === 'sheet'
        ? all([along, compare(across, '<=', stockWidth)])
        : along;
    };
    if (isFree || !isAcross) options.push(fits(length, width));
    if (isFree || isAcross) options.push(fits(width, length));
  }
  return options.length === 0 ? null : any(options);
}

/** What must hold for a shape, or null where it is left to being tried. */
function shapeClaim(part: PartDeclaration, shape: ShapeDeclaration): Expression | null {
  const value = (name: string): Expression | undefined => shape.formulas[name]?.expression;
  const [length, width, thickness] = [
    measure(part.mark, 'length'),
    measure(part.mark, 'width'),
    measure(part.mark, 'thickness'),
  ];
  const isEnd = shape.words['edge'] === 'left' || shape.words['edge'] === 'right';
  const [run, across] = isEnd ? [width, length] : [length, width];
  const parts: Expression[] = [];
  const positive = (name: string): void => {
    const expression = value(name);
    if (expression) parts.push(compare(expression, '>', NM(0)));
  };
  for (const name of ['length', 'width', 'depth', 'diameter']) positive(name);
  const depth = value('depth');
  const isThrough = shape.type === 'hole' || shape.type === 'cutout';
  if (depth) parts.push(compare(depth, isThrough ? '<=' : '<', thickness));
  const over = value('width') ?? NM(0);
  const at = value('at');
  const [x, y] = at?.op === 'list' ? at.items : [];
  switch (shape.type) {
    case 'groove': {
      const inset = value('inset') ?? NM(0);
      const stop = value('stop');
      parts.push(compare(inset, '>=', NM(0)), compare(sum(inset, over), '<=', across));
      if (stop) parts.push(compare(stop, '>=', NM(0)), compare(stop, '<', run));
      return all(parts);
    }
    case 'rabbet':
      return all([...parts, compare(over, '<', across)]);
    case 'notch':
      return all([...parts, compare(value('length') ?? NM(0), '<', length), compare(over, '<', width)]);
    case 'cutout':
      if (!x || !y || value('radius')) return null;
      return all([
        ...parts,
        compare(x, '>=', NM(0)),
        compare(y, '>=', NM(0)),
        compare(sum(x, value('length') ?? NM(0)), '<=', length),
        compare(sum(y, over), '<=', width),
      ]);
    case 'hole': {
      const diameter = value('diameter');
      if (!x || !y || !diameter || value('count')) return null;
      const radius: Expression = {
        op: 'binary',
        kind: 'length',
        sign: '/',
        left: diameter,
        right: { op: 'value', kind: 'number', value: 2 },
      };
      return all([
        ...parts,
        compare(x, '>=', radius),
        compare(y, '>=', radius),
        compare(sum(x, radius), '<=', length),
        compare(sum(y, radius), '<=', width),
      ]);
    }
    default:
      return null;
  }
}

/** Everything that must hold of a plan's parts at every allowed fit, as far as it can be written as expressions. */
export function claimsOf(plan: CompiledPlan): { claims: Claim[]; onlyTried: string[] } {
  const materials = new Map(
    plan.declarations.flatMap((each) => (each.type === 'material' ? [[each.name, each] as const] : [])),
  );
  const claims: Claim[] = [];
  const onlyTried: string[] = [];
  for (const part of plan.declarations) {
    if (part.type !== 'part') continue;
    const { mark } = part;
    const when = part.when?.expression;
    const members = (['length', 'width', 'thickness'] as const).map((member) =>
      compare(measure(mark, member), '>', NM(0)),
    );
    claims.push({ topic: 'sizes', mark, that: where(when, all(members)) });
    const qty = part.qty.expression;
    const number = (value: number): Expression => ({ op: 'value', kind: 'number', value });
    claims.push({
      topic: 'quantities',
      mark,
      that: where(when, all([compare(qty, '>=', number(0)), compare(qty, '<=', number(MAX_PIECES))])),
      whole:
        when === undefined ? qty : { op: 'if', kind: 'number', test: when, then: qty, otherwise: number(0) },
    });
    const material = materials.get(part.material);
    const stock = material && stockClaim(part, material);
    if (stock) claims.push({ topic: 'stock', mark, that: where(when, stock) });
    else if (material?.sizes) onlyTried.push(`part ${mark} in its stock`);
    for (const shape of part.shape) {
      const claim = shapeClaim(part, shape);
      if (claim)
        claims.push({ topic: 'shapes', mark, that: where(when, where(shape.when?.expression, claim)) });
      else onlyTried.push(`the ${shape.type} of part ${mark}`);
    }
  }
  return { claims, onlyTried };
}
