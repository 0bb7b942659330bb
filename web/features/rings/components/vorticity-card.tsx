import { useEffect, useState } from 'react';
import { Pause, Play, SkipBack, SkipForward, X } from 'lucide-react';
import { classNames } from '../../../lib/class-names.ts';
import { count, counted, decimal } from '../../../lib/numbers.ts';
import { Button, IconButton } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { SelectField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { Slider } from '../../../ui/slider.tsx';
import { filmClock, filmTime, FRAMES, type FilmFrame } from '../film.ts';
import { HOURS, POINTS, type RingStudy } from '../ring-study.ts';
import type { FilmPhase } from '../use-film.ts';
import { VorticityCanvas } from './vorticity-canvas.tsx';

interface VorticityCardProps {
  study: RingStudy;
  onChange: (change: Partial<RingStudy>) => void;
  frames: readonly FilmFrame[];
  phase: FilmPhase;
  fault: string | null;
  onStart: () => void;
  onCancel: () => void;
  index: number;
  onIndex: (index: number) => void;
  canvasId: string;
}

const REACH = 1.55;
const ASPECT = 4 / 3;
const GRAIN = 420;
const THUMB = 60;
const FRAME_MS = 160;
/** Frames of the strip, out of all. */
const STRIP = [0, 7, 14, 21, 28, 36];
const SCALES_KM = [1, 2, 5, 10, 20, 50];
const TYPING = /^(INPUT|TEXTAREA|SELECT)$/;

const isStill = () => matchMedia('(prefers-reduced-motion: reduce)').matches;

/** The breakdown frame by frame: picture, film strip, play, step and scrub, and how it is computed. */
export function VorticityCard(props: VorticityCardProps) {
  const { study, onChange, frames, phase, fault, onStart, onCancel, index, onIndex, canvasId } = props;
  const [plays, setPlays] = useState(false);
  const last = frames.length - 1;
  const frame = frames[Math.min(index, last)];
  const stepS = (study.hours * 3600) / FRAMES;
  const strongest = frames[0] ? frames[0].vorticity.reduce((most, value) => Math.max(most, value), 0) : 1;
  const mirrored = study.hemisphere === 'south';
  const still = isStill();
  const hasFilm = phase === 'done' || phase === 'working' || (phase === 'cancelled' && frames.length > 1);

  const play = () => {
    if (plays) return setPlays(false);
    if (!hasFilm) {
      onIndex(0);
      onStart();
    } else if (index >= last && phase !== 'working') onIndex(0);
    if (!still) setPlays(true);
  };
  const step = (by: number) => {
    setPlays(false);
    onIndex(Math.min(Math.max(0, index + by), Math.max(0, last)));
  };

  const isOver = index >= last && phase !== 'working';
  useEffect(() => {
    if (!plays) return;
    const timer = setTimeout(() => {
      if (index < last) onIndex(index + 1);
      else if (isOver && frames.length > 1) setPlays(false);
    }, FRAME_MS);
    return () => clearTimeout(timer);
  }, [plays, index, last, isOver, frames.length, onIndex]);

  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent) => {
      const on = event.target as HTMLElement;
      if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey || TYPING.test(on.tagName)) return;
      if (on.closest('[role=dialog]')) return;
      if (event.key === '.') step(1);
      else if (event.key === ',') step(-1);
      else if (event.key === ' ' && !on.closest('button, a, [role]')) play();
      else return;
      event.preventDefault();
    };
    window.addEventListener('keydown', onKeyDown);
    return () => window.removeEventListener('keydown', onKeyDown);
  });

  const heightKm = 2 * REACH * study.radiusKm;
  const scaleKm = SCALES_KM.findLast((km) => km <= 0.28 * heightKm) ?? 1;
  const title = frame ? `Vorticity at ${filmTime(frame.timeS)}` : 'Vorticity';
  return (
    <Card title={title} aside={`two-dimensional, seen from above${mirrored ? ', clockwise' : ''}`}>
      <div className="grid grid-cols-[minmax(0,1fr)_3.25rem] gap-2.5">
        <div
          role="img"
          aria-label={
            frame
              ? `Vorticity ${filmTime(frame.timeS)} after the start, ${mirrored ? 'clockwise' : 'anticlockwise'}: ${frame.vortices === 0 ? 'no separate vortices' : counted(frame.vortices, 'vortex', 'vortices')} counted, strongest ${decimal(frame.vorticity.reduce((most, value) => Math.max(most, value), 0) * 1000, 1)} thousandths per second.`
              : 'Vorticity: the first frame is being computed'
          }
          className="relative overflow-hidden rounded-2 border border-rule-strong bg-[#F7F5F0] text-[#14262E]"
          style={{ aspectRatio: ASPECT }}
          id={canvasId}
        >
          {frame && (
            <VorticityCanvas
              vorticity={frame.vorticity}
              strongest={strongest}
              reach={REACH}
              mirrored={mirrored}
              width={Math.round(GRAIN * ASPECT)}
              height={GRAIN}
              className="absolute inset-0 size-full"
            />
          )}
          <svg viewBox={`${-100 * ASPECT} -100 ${200 * ASPECT} 200`} className="absolute inset-0 size-full" aria-hidden>
            <circle r={100 / REACH} fill="none" stroke="#8A5A12" strokeWidth={1} strokeDasharray="3 2.5" />
            <path d="M-2.5 0H2.5M0 -2.5V2.5" stroke="#14262E" strokeWidth={0.8} />
            <path
              d={`M${-94 * ASPECT} 88v4h${(200 * scaleKm) / heightKm}v-4`}
              fill="none"
              stroke="#14262E"
              strokeWidth={0.8}
            />
          </svg>
          <span className="absolute top-2 left-3 flex items-center gap-1.5 text-12 font-bold text-[#8A5A12]">
            <svg width={18} height={4} aria-hidden>
              <path d="M0 2H18" stroke="currentColor" strokeWidth={1.75} strokeDasharray="5 3" />
            </svg>
            Radius of maximum wind
          </span>
          <span className="absolute bottom-6 left-3 text-12 font-bold">{scaleKm} km</span>
        </div>
        <div className="flex flex-col items-center text-12 text-ink-2" aria-hidden>
          {decimal(strongest * 1000, 1)}
          <span
            className="my-1 w-3.5 flex-1 rounded-1 border border-rule-strong"
            style={{
              background:
                'linear-gradient(to top, var(--vort-0), var(--vort-1), var(--vort-2), var(--vort-3), var(--vort-4), var(--vort-5), var(--vort-6))',
            }}
          />
          0<span className="whitespace-nowrap">10⁻³ s⁻¹</span>
        </div>
      </div>

      <div className="mt-3 grid grid-cols-[auto_minmax(0,1fr)] items-start gap-2.5">
        <button
          type="button"
          aria-label={plays ? 'Pause' : hasFilm || !still ? 'Play' : 'Compute the film'}
          onClick={play}
          className="mt-2.5 grid size-9 place-items-center rounded-pill bg-action text-on-fill hover:bg-action-hover pointer-coarse:size-11"
        >
          {plays ? <Pause size={17} aria-hidden /> : <Play size={17} aria-hidden />}
        </button>
        <ol aria-label="Film strip" className="grid grid-cols-6 gap-1.5 max-rail:grid-cols-3">
          {STRIP.map((at) => {
            const there = frames[at];
            const isShown = Math.min(index, last) === at;
            return (
              <li key={at} className="min-w-0 text-center text-12">
                <button
                  type="button"
                  aria-label={`Frame at ${filmTime(at * stepS)}${there ? '' : ', not computed yet'}`}
                  aria-pressed={isShown}
                  aria-disabled={!there || undefined}
                  onClick={() => {
                    if (!there) return;
                    setPlays(false);
                    onIndex(at);
                  }}
                  className={classNames(
                    'block aspect-square w-full overflow-hidden rounded-2 border',
                    there ? 'bg-[#F7F5F0]' : 'border-dashed bg-well',
                    isShown ? 'border-2 border-ink' : 'border-rule-strong',
                  )}
                >
                  {there && (
                    <VorticityCanvas
                      {...{ vorticity: there.vorticity, strongest, reach: REACH, mirrored }}
                      width={THUMB}
                      height={THUMB}
                      className="size-full"
                    />
                  )}
                </button>
                <span className={isShown ? 'font-bold' : 'text-ink-2'} aria-hidden>
                  {filmClock(at * stepS)}
                </span>
              </li>
            );
          })}
        </ol>
      </div>

      <div className="mt-1.5 flex flex-wrap items-center gap-x-3 gap-y-1">
        <IconButton label="Step back" icon={SkipBack} onClick={() => step(-1)} />
        <IconButton label="Step on" icon={SkipForward} onClick={() => step(1)} />
        {frames.length > 1 && (
          <Slider
            label="Time of the film"
            stops={frames.map((_, at) => at)}
            value={Math.min(index, last)}
            valueText={(at) => filmTime(frames[at]?.timeS ?? 0)}
            onChange={(at) => {
              setPlays(false);
              onIndex(at);
            }}
            ticks={[]}
            className="min-w-40 flex-1"
          />
        )}
        <p aria-live="polite" className="text-13">
          {frame && (
            <>
              <b>{count(frame.vortices)}</b> {frame.vortices === 1 ? 'vortex' : 'vortices'} counted
            </>
          )}
        </p>
        {phase === 'working' && (
          <span className="flex min-w-40 flex-1 items-center gap-2.5">
            <ProgressBar label="Frames computed" done={frames.length} total={FRAMES + 1} className="flex-1" />
            <Button size="small" icon={X} onClick={onCancel}>
              Cancel
            </Button>
          </span>
        )}
      </div>
      <p role="status" className="sr-only">
        {phase === 'done'
          ? `The film is computed: ${frames.length} frames.`
          : phase === 'cancelled'
            ? `Cancelled after ${counted(frames.length, 'frame')}.`
            : ''}
      </p>
      {phase === 'failed' && (
        <Message tone="error" title="The breakdown wasn’t computed" className="mt-2">
          {fault}. Change the ring, or try a lower resolution.
        </Message>
      )}

      <div className="mt-2.5 grid grid-cols-[1.3fr_1fr_.8fr_1fr] items-end gap-x-3 gap-y-2.5 border-t border-rule pt-2.5 max-lg:grid-cols-2">
        <div>
          <span className="mb-1.25 block text-13 font-bold">Hemisphere</span>
          <Segmented
            label="Hemisphere"
            value={study.hemisphere}
            options={[
              { value: 'north', label: 'north' },
              { value: 'south', label: 'south' },
            ]}
            onChange={(hemisphere) => onChange({ hemisphere })}
            className="w-full"
          />
        </div>
        <SelectField
          label="Grid points"
          value={study.points}
          onChange={({ target }) => onChange({ points: POINTS.find((points) => String(points) === target.value)! })}
        >
          {POINTS.map((points) => (
            <option key={points} value={points}>
              {points}²{points === 256 ? ', slow' : points === 64 ? ', rough' : ''}
            </option>
          ))}
        </SelectField>
        <SelectField
          label="Follow for"
          value={study.hours}
          onChange={({ target }) => onChange({ hours: HOURS.find((hours) => String(hours) === target.value)! })}
        >
          {HOURS.map((hours) => (
            <option key={hours} value={hours}>
              {hours} h
            </option>
          ))}
        </SelectField>
        <SelectField
          label="Rebuild by heating"
          value={study.heatingMin ?? ''}
          onChange={({ target }) => onChange({ heatingMin: target.value === '' ? null : Number(target.value) })}
        >
          <option value="">no</option>
          {[...new Set([60, 120, 240, 480, ...(study.heatingMin ? [study.heatingMin] : [])])]
            .sort((a, b) => a - b)
            .map((minutes) => (
              <option key={minutes} value={minutes}>
                over {decimal(minutes / 60, minutes % 60 === 0 ? 0 : 1)} h
              </option>
            ))}
        </SelectField>
      </div>
      {study.heatingMin !== null && (
        <p className="mt-1.5 text-12 text-ink-2">
          Crude: the vorticity is drawn back to the undisturbed ring over this time, as heating in the eyewall would. No
          convection is computed.
        </p>
      )}
    </Card>
  );
}
