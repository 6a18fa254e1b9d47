/** Shapes that every list, error and versioned change shares. */
import { z } from 'zod';

export const id = z.uuid();
export const instant = z.iso.datetime();
export const day = z.iso.date();
/** A mark, number or short name: one line, no control characters. */
export const shortText = z.string().trim().min(1, 'Enter a text').max(120, 'At most 120 characters').regex(/^[^\p{Cc}]*$/u, 'No line breaks or control characters');
export const longText = z.string().trim().max(4000, 'At most 4000 characters');
export const reason = z.string().trim().min(5, 'Give a reason of at least 5 characters').max(2000, 'At most 2000 characters');
/** The version of the row that the caller saw; a stale one is answered with 409. */
export const version = z.number().int().nonnegative();

export const listQuery = z.strictObject({
  q: z.string().max(120).optional(),
  page: z.coerce.number().int().min(0).max(1_000_000).default(0),
  pageSize: z.coerce.number().int().min(1).max(200).default(50),
  /** Field to sort by, `-` in front for descending. */
  sort: z.string().regex(/^-?[A-Za-z]+$/).optional(),
  state: z.string().max(40).optional(),
});
export type ListQuery = z.infer<typeof listQuery>;

export const page = <T extends z.ZodType>(item: T) => z.object({ items: z.array(item), total: z.number().int().nonnegative() });

/** RFC 9457 problem details, with a stable code and, for input, the paths of the fields at fault. */
export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  code: z.string(),
  detail: z.string(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
});
export type Problem = z.infer<typeof problem>;

export const personName = z.object({ id, name: z.string() });

/** One entry of the find box. */
export const found = z.object({ kind: z.enum(['order', 'sample', 'specimen', 'run', 'certificate', 'instrument']), label: z.string(), path: z.string() });
export type Found = z.infer<typeof found>;

/** What a server-sent event says: look again at this row. */
export const changeEvent = z.object({ topic: z.enum(['order', 'specimen', 'run', 'fit', 'determination', 'certificate']), id, orderId: id.nullable() });
export type ChangeEvent = z.infer<typeof changeEvent>;
