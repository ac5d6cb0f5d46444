import { useSyncExternalStore } from 'react';

const never = () => () => {};

/**
 * False in the server's HTML and in the first render of the browser, then true. Islands hydrate at different
 * times, so what one of them has put into a shared cache must not be drawn before this is true.
 */
export function useHydrated(): boolean {
  return useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
}
