import { useEffect, useRef } from 'react';
import { paintVorticity, type VorticityView } from '../vorticity-drawing.ts';

interface VorticityCanvasProps extends VorticityView {
  /** Grain of the picture in pixels; it is stretched over its place. */
  width: number;
  height: number;
  className?: string;
}

/** One frame's vorticity, painted in the cool scale. */
export function VorticityCanvas({ width, height, className, ...view }: VorticityCanvasProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const { vorticity, strongest, reach, mirrored } = view;
  useEffect(() => {
    if (canvas.current) paintVorticity(canvas.current, { vorticity, strongest, reach, mirrored });
  }, [vorticity, strongest, reach, mirrored, width, height]);
  return <canvas ref={canvas} width={width} height={height} className={className} aria-hidden />;
}
