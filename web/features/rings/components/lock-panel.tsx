import { useState } from 'react';
import type { RingReply } from '#contract/rings.ts';
import { decimal, signed } from '../../../lib/numbers.ts';
import { Card } from '../../../ui/card.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { SelectField } from '../../../ui/field.tsx';
import { polygonOf } from '../polygons.ts';

type Mode = RingReply['sharpModes'][number];
const DEG_PER_MIN = (180 / Math.PI) * 60;
const perMinute = (radPerS: number) => radPerS * DEG_PER_MIN;

/** Why the waves of one number do or don't break the ring, in a sentence or two. */
const reasonOf = (mode: Mode): string => {
  if (mode.m === 1)
    return 'One wave shifts the whole ring and then stands still; the other makes it wobble with the flow at the radius of maximum wind. Neither can feed the other, whatever the ring: m = 1 moves a ring, it doesn’t break it.';
  if (mode.m === 2 && !mode.locked)
    return 'The ring turns elliptic, and each edge’s wave keeps its own speed: they run past each other. For an eye that turns no faster than the average, m = 2 never locks in a sharp ring.';
  if (!mode.locked) {
    const [fast, slow] = Array.isArray(mode.frequencyRadPerS) ? mode.frequencyRadPerS : [0, 0];
    return `The two waves run past each other, one pattern at ${decimal(perMinute(fast / mode.m), 1)} and the other at ${decimal(perMinute(slow / mode.m), 1)} °/min: what one strengthens now it weakens later. Nothing grows.`;
  }
  const pattern = Array.isArray(mode.frequencyRadPerS) ? 0 : mode.frequencyRadPerS / mode.m;
  const lag = Math.abs(mode.phaseLagDeg ?? 0);
  return `Both waves turn together at ${decimal(perMinute(pattern), 1)} °/min. The outer crest lags by ${decimal(lag, 0)}° of phase, ${decimal(lag / mode.m, 0)}° round the ring, so that each wave’s wind pushes the other further out: they grow. A lag of 90° would grow fastest.`;
};

/** How the waves on the ring's two edges meet: their speeds beside the flow's, locked or not, and why. */
export function LockPanel({ ring }: { ring: RingReply }) {
  const [chosen, setChosen] = useState<number | null>(null);
  const m = chosen ?? ring.wavenumber ?? 4;
  const mode = ring.sharpModes.find((other) => other.m === m);
  if (!mode) return null;
  const rows = [
    { name: 'Inner edge', wave: mode.innerWaveRadPerS, flow: mode.innerFlowRadPerS },
    { name: 'Outer edge', wave: mode.outerWaveRadPerS, flow: mode.outerFlowRadPerS },
  ];
  return (
    <Card title="How the ring locks" aside="sharp edges, in closed form">
      <div className="flex flex-wrap items-end gap-3">
        <SelectField label="Wave" value={m} onChange={({ target }) => setChosen(Number(target.value))} className="w-44">
          {ring.sharpModes.map((other) => (
            <option key={other.m} value={other.m}>
              m = {other.m}, {polygonOf(other.m)}
            </option>
          ))}
        </SelectField>
        <span className="pb-1.5">
          {mode.locked ? <Chip tone="done">Locked, grows</Chip> : <Chip tone="idle">Not locked, neutral</Chip>}
        </span>
      </div>
      <table className="mt-3 w-full text-13" aria-label={`Edge waves of m = ${m}, degrees a minute`}>
        <thead className="text-12 text-ink-2">
          <tr>
            <th scope="col" className="py-1 text-left font-normal">
              turns, °/min
            </th>
            <th scope="col" className="py-1 text-right font-normal">
              wave alone
            </th>
            <th scope="col" className="py-1 text-right font-normal">
              flow there
            </th>
            <th scope="col" className="py-1 text-right font-normal">
              wave − flow
            </th>
          </tr>
        </thead>
        <tbody className="[&_td]:text-right [&_tr]:border-t [&_tr]:border-rule">
          {rows.map(({ name, wave, flow }) => (
            <tr key={name}>
              <th scope="row" className="py-1.5 text-left font-normal">
                {name}
              </th>
              <td>{decimal(perMinute(wave), 1)}</td>
              <td>{decimal(perMinute(flow), 1)}</td>
              <td>{signed(perMinute(wave - flow), 1)}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="mt-2.5 text-13">
        The inner wave runs ahead of the flow at its edge, the outer one behind: only so can they meet. {reasonOf(mode)}
      </p>
      <p className="mt-2 text-12 text-ink-2">
        An eye that turns more slowly (a smaller ratio) slows the inner flow, brings the two waves closer, and with it
        the pattern on. The smooth ring, which is used, moves the fastest wave and lowers its growth.
      </p>
    </Card>
  );
}
