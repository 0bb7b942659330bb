import { Check } from 'lucide-react';
import type { SiteDetail } from '#contract/runs.ts';
import { classNames } from '../../../lib/class-names.ts';
import { decimal, signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';

/** "open_water" reads "open water". */
const inWords = (terrain: string) => terrain.replaceAll('_', ' ');

/** The same storm over other ground: how far the class of terrain given for a site carries its gust. */
export function TerrainEffects({ effects }: { effects: SiteDetail['terrainEffects'] }) {
  const { gust, label, toUnit } = useUnits();
  const present = effects.find(({ isPresent }) => isPresent);
  if (effects.length === 0) return null;
  return (
    <section aria-label="What the ground does">
      <h3 className="text-15">What the ground does</h3>
      <p className="text-12 text-ink-2">
        Plain peak gust, {label}, if the ground here were of another class and everything else stayed as it is.
        {!present && ' The roughness of this site is of no class in the list.'}
      </p>
      <dl className="mt-1.5 text-13">
        {effects.map(({ terrain, roughnessM, plainMs, isPresent }) => (
          <div
            key={terrain}
            className={classNames(
              'flex items-baseline gap-3 border-t border-rule px-1.5 py-1.5',
              isPresent && 'bg-selected font-bold',
            )}
          >
            <dt className="min-w-0 flex-1">
              {isPresent && <Check size={13} strokeWidth={2.8} className="mr-1 inline text-done" aria-hidden />}
              {inWords(terrain)}
              {isPresent && ', as here'}
              <span className="font-normal text-ink-2">, roughness {decimal(roughnessM, 3)} m</span>
            </dt>
            <dd className="text-right whitespace-nowrap">
              {gust(plainMs)}
              {present && (
                <span className="inline-block w-16 font-normal text-ink-2">
                  {isPresent ? '' : signed(toUnit(plainMs) - toUnit(present.plainMs), 1)}
                </span>
              )}
            </dd>
          </div>
        ))}
      </dl>
    </section>
  );
}
