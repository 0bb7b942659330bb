import { useSyncExternalStore } from 'react';

/** Below this the frame has bottom tabs instead of a rail. */
const NARROW = '(max-width: 700px)';

const subscribe = (listener: () => void) => {
  const query = matchMedia(NARROW);
  query.addEventListener('change', listener);
  return () => query.removeEventListener('change', listener);
};

export const useNarrow = (): boolean => useSyncExternalStore(subscribe, () => matchMedia(NARROW).matches);
