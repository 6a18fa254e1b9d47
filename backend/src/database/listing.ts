import { asc, desc, ilike, or, type AnyColumn, type SQL } from 'drizzle-orm';
import type { ListQuery } from '@strainwright/common/contract/wire';
import { Problem } from '../platform/problem';
import { containing } from './search';

const refuse = (path: string, message: string): Problem => new Problem(400, 'query.invalid', `${path}: ${message}`, [{ path, message }]);

/** Order of a list: the field asked for (`-` in front: descending), else the first of `fields`; the id settles ties, so that pages never overlap. */
export function sortedBy(query: Pick<ListQuery, 'sort'>, fields: Readonly<Record<string, AnyColumn | SQL>>, id: AnyColumn, otherwise: string): SQL[] {
  const asked = query.sort ?? otherwise;
  const field = Object.hasOwn(fields, asked.replace(/^-/, '')) ? fields[asked.replace(/^-/, '')] : undefined;
  if (field === undefined) throw refuse('sort', `Sort by one of ${Object.keys(fields).join(', ')}`);
  return asked.startsWith('-') ? [desc(field), desc(id)] : [asc(field), asc(id)];
}

/** True where any of the columns holds the text that was searched for; undefined, which is no condition, when nothing was. */
export function matching(q: string | undefined, ...columns: (AnyColumn | SQL)[]): SQL | undefined {
  const text = q?.trim() ?? '';
  if (text === '') return undefined;
  return or(...columns.map((column) => ilike(column as AnyColumn, containing(text))));
}

/** The state that a list is asked for. @throws Problem 400 naming the states that there are */
export function stateAsked<S extends string>(query: Pick<ListQuery, 'state'>, states: readonly S[]): S | undefined {
  if (query.state === undefined) return undefined;
  const found = states.find((state) => state === query.state);
  if (found === undefined) throw refuse('state', states.length === 0 ? 'This list has no states' : `One of ${states.join(', ')}`);
  return found;
}
