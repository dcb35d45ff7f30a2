import { z } from 'zod';

/** Query of every list: an opaque cursor and a page size. */
export const pageQuery = z.strictObject({
  cursor: z.string().max(400).optional(),
  limit: z.coerce.number().int().min(1).max(200).default(50),
});

/** One page of a list. `next` is the cursor of the following page, null at the end. There is no total: counting is a query of its own. */
export function pageOf<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), next: z.string().nullable() });
}

export interface Page<T> {
  items: T[];
  next: string | null;
}
