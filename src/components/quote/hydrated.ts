import { useSyncExternalStore } from 'react';

const never = () => () => undefined;

/** False on the server and at the first look, true once the page's scripts run. */
export function useHydrated(): boolean {
  return useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
}
