import { useCallback, useEffect, useRef, useState } from 'react';
import type { FilmAnswer, FilmAsked, FilmFrame, FilmOrder } from './film.ts';

export type FilmPhase = 'still' | 'working' | 'done' | 'cancelled' | 'failed';
interface Film {
  /** What the frames were computed from. */
  order: FilmOrder;
  phase: FilmPhase;
  frames: readonly FilmFrame[];
  fault: string | null;
}

/** The film of a ring, computed in a worker: its first frame by itself, the rest when it is asked for. */
export function useFilm(order: FilmOrder) {
  const worker = useRef<Worker | null>(null);
  const [film, setFilm] = useState<Film>({ order, phase: 'still', frames: [], fault: null });

  const end = useCallback(() => {
    worker.current?.terminate();
    worker.current = null;
  }, []);

  const ask = useCallback(
    (whole: boolean) => {
      end();
      const asked = new Worker(new URL('./breakdown.worker.ts', import.meta.url), { type: 'module' });
      worker.current = asked;
      setFilm((before) => ({
        order,
        phase: whole ? 'working' : 'still',
        // The ring itself stays in view while its film is begun.
        frames: whole && before.order === order ? before.frames.slice(0, 1) : [],
        fault: null,
      }));
      const received: FilmFrame[] = [];
      const put = (change: Partial<Film>) =>
        setFilm((before) => (before.order === order ? { ...before, ...change } : before));
      asked.onmessage = ({ data }: MessageEvent<FilmAnswer>) => {
        if (worker.current !== asked) return;
        if ('frame' in data) {
          received.push(data.frame);
          put({ frames: [...received] });
        } else {
          end();
          if ('refused' in data) put({ phase: 'failed', fault: data.refused });
          else if (whole) put({ phase: 'done' });
        }
      };
      asked.onerror = () => {
        if (worker.current !== asked) return;
        end();
        put({ phase: 'failed', fault: 'The browser ended the computation' });
      };
      asked.postMessage({ order, whole } satisfies FilmAsked);
    },
    [order, end],
  );

  useEffect(() => {
    ask(false);
    return end;
  }, [ask, end]);

  const cancel = useCallback(() => {
    end();
    setFilm((before) => ({ ...before, phase: 'cancelled' }));
  }, [end]);

  // Between a new ring and its first frame nothing of the old one is shown.
  const isOf = film.order === order;
  return {
    phase: isOf ? film.phase : ('still' as const),
    frames: isOf ? film.frames : [],
    fault: isOf ? film.fault : null,
    start: useCallback(() => ask(true), [ask]),
    cancel,
  };
}
