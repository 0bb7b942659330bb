import type { RingReply } from '#contract/rings.ts';
import { classNames } from '../../../lib/class-names.ts';
import { decimal } from '../../../lib/numbers.ts';

const minutes = (seconds: number | null) => (seconds === null ? null : `${decimal(seconds / 60, 0)} min`);
const km = (metres: number) => decimal(metres / 1000, 1);

/** What this ring does, in minutes and kilometres; the exact value of each is its title. */
export function FactsStrip({ ring, isOld }: { ring: RingReply; isOld: boolean }) {
  const isStable = ring.wavenumber === null;
  const facts: { name: string; value: string | null; note: string; exact: string }[] = [
    {
      name: 'Vortices',
      value: isStable ? 'None' : String(ring.wavenumber),
      note: isStable ? 'stable ring' : `fastest wave, ${ring.polygon}`,
      exact: isStable ? 'no growing wave' : `wavenumber ${ring.wavenumber}`,
    },
    { name: 'Growth', value: minutes(ring.eFoldS), note: 'to grow e-fold', exact: `${ring.eFoldS} s` },
    {
      name: 'Pattern turns in',
      value: minutes(ring.patternPeriodS),
      note: 'one full turn',
      exact: `${ring.patternPeriodS} s`,
    },
    {
      name: 'One passes every',
      value: minutes(ring.passIntervalS),
      note: 'at a fixed point',
      exact: `${ring.passIntervalS} s`,
    },
    {
      name: 'Active at least',
      value: isStable ? null : minutes(ring.lifetimeS),
      note: 'after roll-up',
      exact: `${ring.lifetimeS} s`,
    },
    {
      name: 'Amplitude',
      value: decimal(ring.amplitude, 3),
      note: 'of ring wind, unit draw',
      exact: String(ring.amplitude),
    },
    {
      name: 'Orbit, core',
      value:
        ring.coreRadiusM === null
          ? `${km(ring.orbitRadiusM)} km`
          : `${km(ring.orbitRadiusM)}, ${km(ring.coreRadiusM)} km`,
      note: 'radius',
      exact: `${ring.orbitRadiusM} m, ${ring.coreRadiusM ?? 'no'} m`,
    },
  ];
  return (
    <section
      aria-label="What this ring does"
      aria-busy={isOld}
      className="rounded-3 border border-rule bg-sheet shadow-1"
    >
      <dl
        className={classNames(
          'grid grid-cols-7 max-xl:grid-cols-4 max-md:grid-cols-2',
          '[&>div]:border-rule [&>div]:px-3.5 [&>div]:py-2.75 [&>div+div]:border-l',
          'max-xl:[&>div:nth-child(4n+1)]:border-l-0 max-xl:[&>div:nth-child(n+5)]:border-t',
          'max-xl:[&>div:last-child]:col-span-2',
          'max-md:[&>div:nth-child(odd)]:border-l-0 max-md:[&>div:nth-child(n+3)]:border-t',
          isOld && 'opacity-70',
        )}
      >
        {facts.map(({ name, value, note, exact }) => (
          <div key={name} className="min-w-0">
            <dt className="text-13 text-ink-2">{name}</dt>
            <dd title={value === null ? undefined : exact}>
              <b className="block text-20 leading-tight font-black tracking-tight whitespace-nowrap">{value ?? '–'}</b>
              <span className="text-12 text-ink-2">{value === null ? 'nothing grows' : note}</span>
            </dd>
          </div>
        ))}
      </dl>
      <p role="status" className={isStable ? 'border-t border-rule px-3.5 py-2 text-13 font-bold' : 'sr-only'}>
        {isStable
          ? 'No vortices: growth below 0.02 of the average vorticity'
          : `${ring.wavenumber} vortices, ${ring.polygon}`}
      </p>
    </section>
  );
}
