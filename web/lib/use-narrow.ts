import { useSyncExternalStore } from 'react';

/** Below this the frame has bottom tabs instead of a rail. */
const NARROW = '(max-width: 700px)';

/** From here up parts of a page stand beside each other and may float. */
const WIDE = '(min-width: 1101px)';

const subscribeTo = (media: string) => (listener: () => void) => {
  const query = matchMedia(media);
  query.addEventListener('change', listener);
  return () => query.removeEventListener('change', listener);
};
const [toNarrow, toWide] = [subscribeTo(NARROW), subscribeTo(WIDE)];

export const useNarrow = (): boolean => useSyncExternalStore(toNarrow, () => matchMedia(NARROW).matches);
export const useWide = (): boolean => useSyncExternalStore(toWide, () => matchMedia(WIDE).matches);
