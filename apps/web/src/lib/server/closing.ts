/**
 * What has to end before the server can close. The server's own file and the build are two bundles with one
 * process, so the list hangs on the global object.
 */

type Closer = () => void | Promise<void>;

declare global {
  var strikeboardClosers: Set<Closer> | undefined;
}

/** Runs when the server begins to close; returns how to take it back. */
export function onClosing(closer: Closer): () => void {
  globalThis.strikeboardClosers ??= new Set();
  const closers = globalThis.strikeboardClosers;
  closers.add(closer);
  return () => closers.delete(closer);
}

/** Ends everything registered, each whatever the others do. */
export async function closeAll(): Promise<void> {
  await Promise.allSettled([...(globalThis.strikeboardClosers ?? [])].map(async (closer) => closer()));
}
