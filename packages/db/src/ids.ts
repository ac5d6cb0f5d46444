import { uuidv7 } from 'uuidv7';

/** A new row's key: UUIDv7 (RFC 9562), so that keys sort by the time they were made. */
export function newId(): string {
  return uuidv7();
}
