import { z } from 'zod';

/** An opaque id: UUID (version 7 when made here). */
export const id = z.uuid();

/** Part of an address: lower-case letters, digits and single hyphens, 3 to 60 characters. */
export const slug = z
  .string()
  .min(3)
  .max(60)
  .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/, 'Use lower-case letters, digits and single hyphens.');

/** Makes a slug from a title: accents dropped, everything else that is not a letter or digit becomes a hyphen. */
export function slugFrom(title: string): string {
  const plain = title
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/[đĐ]/g, 'd')
    .replace(/[øØ]/g, 'o')
    .replace(/[łŁ]/g, 'l')
    .replace(/ß/g, 'ss')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
    .slice(0, 60)
    .replace(/-+$/, '');
  return plain.length >= 3 ? plain : `event-${plain}`.replace(/-+$/, '');
}
