/** A parsed form: text, lists and nested objects, as the bracket notation spells them. */
export type FormValue = string | FormValue[] | { [key: string]: FormValue };

type Branch = Map<string, string | Branch>;

const MAX_DEPTH = 10;
const MAX_LENGTH = 1_000_000;

function splitName(name: string): string[] {
  const head = /^[^[\]]+/.exec(name)?.[0];
  if (head === undefined) return [name];
  const rest = name.slice(head.length);
  if (!/^(?:\[[^[\]]*\])*$/.test(rest)) return [name];
  return [head, ...[...rest.matchAll(/\[([^[\]]*)\]/g)].map((match) => match[1] ?? '')];
}

function settle(branch: Branch): FormValue {
  const keys = [...branch.keys()];
  const values = [...branch.values()].map((value) => (typeof value === 'string' ? value : settle(value)));
  if (keys.length > 0 && keys.every((key, index) => key === String(index))) return values;
  return toObject(keys.map((key, index) => [key, values[index] ?? '']));
}

// Without a prototype, a key such as __proto__ is a key like any other.
function toObject(entries: [string, FormValue][]): { [key: string]: FormValue } {
  const object: { [key: string]: FormValue } = Object.create(null);
  for (const [key, value] of entries) object[key] = value;
  return object;
}

/**
 * Reads `a=1&b[c]=2&d[0]=3&d[]=4` as the payment service does.
 * @throws RangeError when it is longer or nested deeper than any lawful request
 */
export function parseForm(text: string): { [key: string]: FormValue } {
  if (text.length > MAX_LENGTH) throw new RangeError('form is too long');
  const root: Branch = new Map();
  for (const [name, value] of new URLSearchParams(text)) {
    const path = splitName(name);
    if (path.length > MAX_DEPTH) throw new RangeError('form is nested too deep');
    let branch = root;
    for (const [index, raw] of path.entries()) {
      const key = raw === '' ? String(branch.size) : raw;
      if (index === path.length - 1) {
        branch.set(key, value);
        break;
      }
      const next = branch.get(key);
      if (next instanceof Map) {
        branch = next;
      } else {
        const fresh: Branch = new Map();
        branch.set(key, fresh);
        branch = fresh;
      }
    }
  }
  return toObject([...root].map(([key, value]) => [key, typeof value === 'string' ? value : settle(value)]));
}
