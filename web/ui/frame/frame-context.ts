import { createContext, useContext } from 'react';

interface Frame {
  /** Shown as a chip in the top bar of every page. */
  readOnlyChip: string | null;
}

export const FrameContext = createContext<Frame>({ readOnlyChip: null });
export const useFrame = () => useContext(FrameContext);
