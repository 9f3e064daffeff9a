import { refuse } from './errors.ts';

interface PageParams {
  limit?: number | undefined;
  starting_after?: string | undefined;
  ending_before?: string | undefined;
}

interface Page<T> {
  object: 'list';
  data: T[];
  has_more: boolean;
  url: string;
}

type Range =
  | number
  | { gt?: number | undefined; gte?: number | undefined; lt?: number | undefined; lte?: number | undefined };

/** Whether a time lies in the range asked for. */
export function isWithin(time: number, range: Range | undefined): boolean {
  if (range === undefined) return true;
  if (typeof range === 'number') return time === range;
  return (
    time > (range.gt ?? -1) &&
    time >= (range.gte ?? 0) &&
    time < (range.lt ?? Infinity) &&
    time <= (range.lte ?? Infinity)
  );
}

function indexOf(rows: { id: string }[], id: string, param: string): number {
  const index = rows.findIndex((row) => row.id === id);
  return index === -1 ? refuse(`No such object: '${id}'`, { code: 'resource_missing', param }) : index;
}

/** One page of a list, newest first as published; `rows` come in the order in which they were made. */
export function pageOf<T extends { id: string }>(
  rows: readonly T[],
  params: PageParams,
  url: string,
): Page<T> {
  return slice([...rows].reverse(), params, url);
}

/** One page of a list that is shown in the order given. */
export function slice<T extends { id: string }>(
  rows: readonly T[],
  params: PageParams,
  url: string,
): Page<T> {
  const limit = params.limit ?? 10;
  const list = [...rows];
  if (params.starting_after !== undefined && params.ending_before !== undefined) {
    refuse('You may only specify one of these parameters: starting_after, ending_before.', {
      param: 'starting_after',
    });
  }
  if (params.ending_before !== undefined) {
    const before = list.slice(0, indexOf(list, params.ending_before, 'ending_before'));
    return { object: 'list', data: before.slice(-limit), has_more: before.length > limit, url };
  }
  const start =
    params.starting_after === undefined ? 0 : indexOf(list, params.starting_after, 'starting_after') + 1;
  return {
    object: 'list',
    data: list.slice(start, start + limit),
    has_more: list.length > start + limit,
    url,
  };
}
