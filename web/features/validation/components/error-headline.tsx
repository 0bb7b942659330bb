import type { ComparedSettings, Validation } from '#contract/validation.ts';
import { counted } from '../../../lib/numbers.ts';
import { Card } from '../../../ui/card.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { errorsFor, share, shareRange, signedShare } from '../validation-words.ts';

const SHOWN: readonly { settings: ComparedSettings; title: string; text: string }[] = [
  { settings: 'default', title: 'Pressure', text: 'The central pressure sets the intensity.' },
  { settings: 'wind', title: 'Wind', text: 'The reported maximum wind sets it.' },
];

/** Bias and mean error of the plain peaks with their ranges: the default beside the wind. */
export function ErrorHeadline({ validation }: { validation: Validation }) {
  const all = errorsFor(validation, { settings: 'default' });
  return (
    <Card padded={false}>
      <h2 className="sr-only">Plain peak gusts against observed ones</h2>
      <div className="grid grid-cols-2 max-md:grid-cols-1">
        {SHOWN.map(({ settings, title, text }) => {
          const plain = errorsFor(validation, { settings });
          return (
            <section
              key={settings}
              aria-label={`Errors by ${title.toLowerCase()}`}
              className="border-l border-rule px-4 py-3.5 first:border-l-0 max-md:border-t max-md:border-l-0 max-md:first:border-t-0"
            >
              <h3 className="flex items-center gap-2 text-15">
                {title}
                {settings === 'default' && <Chip tone="done">default</Chip>}
              </h3>
              <p className="text-13 text-ink-2">{text}</p>
              <dl className="mt-2 grid grid-cols-2 gap-x-4">
                <div>
                  <dt className="text-13 text-ink-2">Bias</dt>
                  <dd className="text-28 leading-tight font-black whitespace-nowrap max-rail:text-22">
                    {shareRange(plain.bias)}
                  </dd>
                  <dd className="text-13">central {signedShare(plain.bias.value)}</dd>
                </div>
                <div>
                  <dt className="text-13 text-ink-2">Mean absolute error</dt>
                  <dd className="text-28 leading-tight font-black whitespace-nowrap max-rail:text-22">
                    {shareRange(plain.meanAbsolute)}
                  </dd>
                  <dd className="text-13">central {share(plain.meanAbsolute.value)}</dd>
                </div>
              </dl>
            </section>
          );
        })}
      </div>
      <p className="border-t border-rule px-4 py-2.5 text-13 text-ink-2">
        Plain 3-s gusts at {counted(all.count, 'place')} in {counted(all.storms, 'storm')} where the peak was recorded,
        modelled less observed as a share of the observed. Ranges hold 95 % of {validation.bootstrap.resamples}{' '}
        resamples of storms, then of their observations (seed {validation.bootstrap.seed}).
      </p>
    </Card>
  );
}
