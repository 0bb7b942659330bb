import { useEffect, useLayoutEffect, useRef, useState, type KeyboardEvent, type PointerEvent } from 'react';
import { classNames } from '../../lib/class-names.ts';
import { decimal } from '../../lib/numbers.ts';
import { useTheme } from '../../lib/theme.ts';
import { useUnits } from '../../lib/units.tsx';
import { readTokens } from '../map/map-tokens.ts';
import { percentOf } from './axis.ts';
import { drawField, type FieldMarks } from './field-drawing.ts';
import { insideField, strongestPlace, type FieldGrid, type FieldPlace } from './field-grid.ts';

interface FieldPictureProps {
  /** Whose wind it is. */
  label: string;
  grid: FieldGrid;
  marks: FieldMarks;
  cursor: FieldPlace;
  onCursor: (place: FieldPlace) => void;
  /** Id of the numbers under the cursor. */
  describedBy: string;
  className?: string;
}

const SHIFT_STEPS = 5;

/** Wind around the centre in the gust colours, north up. Pointer and arrow keys move a cursor over it. */
export function FieldPicture({ label, grid, marks, cursor, onCursor, describedBy, className }: FieldPictureProps) {
  const frame = useRef<HTMLDivElement>(null);
  const canvas = useRef<HTMLCanvasElement>(null);
  const [size, setSize] = useState(0);
  const [theme] = useTheme();
  const { toUnit } = useUnits();

  useLayoutEffect(() => {
    const element = frame.current!;
    const measure = () => setSize(Math.round(element.clientWidth));
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, []);

  useEffect(() => {
    if (size === 0 || canvas.current === null) return;
    const ratio = window.devicePixelRatio || 1;
    canvas.current.width = Math.round(size * ratio);
    canvas.current.height = Math.round(size * ratio);
    const context = canvas.current.getContext('2d');
    if (!context) return;
    context.scale(ratio, ratio);
    drawField({ context, size, grid, token: readTokens() }, marks, (speedMs) => decimal(toUnit(speedMs), 0));
  }, [size, grid, marks, theme, toUnit]);

  const follow = (event: PointerEvent) => {
    const box = event.currentTarget.getBoundingClientRect();
    if (box.width === 0) return;
    onCursor(
      insideField(grid, {
        eastM: ((event.clientX - box.left) / box.width) * 2 * grid.halfWidthM - grid.halfWidthM,
        northM: grid.halfWidthM - ((event.clientY - box.top) / box.height) * 2 * grid.halfWidthM,
      }),
    );
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    const step = ((2 * grid.halfWidthM) / (grid.points - 1)) * (event.shiftKey ? SHIFT_STEPS : 1);
    const { eastM, northM } = cursor;
    const next = {
      ArrowLeft: { eastM: eastM - step, northM },
      ArrowRight: { eastM: eastM + step, northM },
      ArrowUp: { eastM, northM: northM + step },
      ArrowDown: { eastM, northM: northM - step },
      Home: { eastM: 0, northM: 0 },
      End: strongestPlace(grid),
    }[event.key];
    if (!next) return;
    event.preventDefault();
    onCursor(insideField(grid, next));
  };
  const at = insideField(grid, cursor);
  return (
    <div
      ref={frame}
      role="application"
      aria-roledescription="wind field"
      aria-label={`${label}. Arrow keys move the cursor, with Shift five times as far; Home goes to the centre, End to the strongest gust.`}
      aria-describedby={describedBy}
      tabIndex={0}
      onKeyDown={onKeyDown}
      onPointerMove={follow}
      onPointerDown={follow}
      className={classNames(
        'relative aspect-square cursor-crosshair touch-pan-y overflow-hidden bg-map-sea',
        className,
      )}
    >
      <canvas ref={canvas} aria-hidden className="absolute inset-0 size-full" />
      <span
        aria-hidden
        className="pointer-events-none absolute size-4 -translate-1/2 rounded-pill border-2 border-(--p-ink) shadow-[0_0_0_2px_var(--p-porcelain),inset_0_0_0_1.5px_var(--p-porcelain)]"
        style={{
          left: percentOf((at.eastM + grid.halfWidthM) / (2 * grid.halfWidthM)),
          top: percentOf((grid.halfWidthM - at.northM) / (2 * grid.halfWidthM)),
        }}
      />
    </div>
  );
}
