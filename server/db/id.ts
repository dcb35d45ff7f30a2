import { v7 } from 'uuid';

/** A new opaque id: UUID version 7 (RFC 9562), so that ids of one table sort by time of making. */
export function newId(): string {
  return v7();
}
