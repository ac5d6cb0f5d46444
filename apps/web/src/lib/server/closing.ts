/**
 * What has to end before the server can close. The server's own file and the build are two bundles with one
 * process, so the list hangs on a registered symbol.
 */
const key = Symbol.for('strikeboard.closers');

type Closer = () => void | Promise<void>;
const holder: { [key]?: Set<Closer> } = globalThis;

/** Runs when the server begins to close; returns how to take it back. */
export function onClosing(closer: Closer): () => void {
  holder[key] ??= new Set();
  const closers = holder[key];
  closers.add(closer);
  return () => closers.delete(closer);
}

/** Ends everything registered, each whatever the others do. */
export async function closeAll(): Promise<void> {
  await Promise.allSettled([...(holder[key] ?? [])].map(async (closer) => closer()));
}
