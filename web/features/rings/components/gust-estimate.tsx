import type { RingReply } from '#contract/rings.ts';
import { signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Card } from '../../../ui/card.tsx';
import { DRAWN_STRENGTHS, gustUnder } from '../gust-estimate.ts';
import type { RingStudy } from '../ring-study.ts';

/** What the vortices add where one passes, as an estimate that says what it rests on. */
export function GustEstimate({ ring, study }: { ring: RingReply; study: RingStudy }) {
  const { gust, label, toUnit } = useUnits();
  const given = { maxWindMs: study.maxWindMs, amplitude: ring.amplitude, windIs: study.windIs };
  return (
    <Card title="Gust it implies" aside={`3-s, open sea, ${label}; an estimate`}>
      {ring.amplitude === 0 ? (
        <p className="text-13">
          {ring.wavenumber === null
            ? 'A stable ring adds nothing to the gust.'
            : 'Too weak, too wide or too far inland: vortices add nothing to the gust.'}
        </p>
      ) : (
        <table className="w-full text-13" aria-label="Gust under a passing vortex">
          <thead className="text-12 text-ink-2">
            <tr>
              <th scope="col" className="py-1 text-left font-normal">
                strength drawn, at most
              </th>
              <th scope="col" className="py-1 text-right font-normal">
                gust
              </th>
              <th scope="col" className="py-1 text-right font-normal">
                over the ring’s own
              </th>
            </tr>
          </thead>
          <tbody className="[&_td]:text-right [&_tr]:border-t [&_tr]:border-rule">
            {DRAWN_STRENGTHS.map(({ name, strength }) => {
              const { gustMs, extraMs } = gustUnder(strength, given);
              return (
                <tr key={name}>
                  <th scope="row" className="py-1.5 text-left font-normal">
                    {name}
                  </th>
                  <td>{gust(gustMs)}</td>
                  <td>{signed(toUnit(extraMs), 1)}</td>
                </tr>
              );
            })}
          </tbody>
        </table>
      )}
      <p className="mt-2.5 text-12 text-ink-2">
        Ring wind × (1 + strength × amplitude) × 1.11, where a vortex passes over the radius of maximum wind
        {study.windIs === 'peak' && '; with a peak given, the mean behind it is lowered first'}. A site’s own range
        comes from a run: it depends on whether and when one passes.
      </p>
      <p className="mt-2 text-12 text-ink-2">
        The strengths and the ring’s width and eye are judged inputs; expect a factor of 2 either way. A two-dimensional
        picture: no wind record validates it. Tornado-scale vortices and boundary-layer jets aren’t covered.
      </p>
    </Card>
  );
}
