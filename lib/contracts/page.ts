import { z } from "zod";

/** Ids in paths and bodies. */
export const idSchema = z.uuid();
export const idParams = z.object({ id: idSchema });

/** Times are ISO 8601 in UTC. */
export const timeSchema = z.iso.datetime();

/** Lists page by an opaque cursor: what `nextCursor` said goes into the next request. */
export const pageQuery = z.object({
  cursor: z.string().max(200).optional(),
  limit: z.coerce.number().int().min(1).max(100).default(25),
});
export type PageQuery = z.infer<typeof pageQuery>;

/** The shape of a list's answer. */
export function pageOf<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), nextCursor: z.string().nullable() });
}
export type Page<T> = { readonly items: readonly T[]; readonly nextCursor: string | null };

/** A line of text that goes onto a screen: no control characters, no spaces at its ends. */
export function lineText(longest: number) {
  return z
    .string()
    .trim()
    .min(1)
    .max(longest)
    .regex(/^\P{Cc}*$/u, "has control characters");
}
