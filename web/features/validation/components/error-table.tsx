import { useState } from 'react';
import type { GustErrors, Resampled, Validation } from '#contract/validation.ts';
import { decimal, range } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Card } from '../../../ui/card.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { errorsFor, share, shareRange, signedShare } from '../validation-words.ts';

const LAYERS = [
  { layer: 'plain', name: 'plain' },
  { layer: 'enhanced', name: 'enhanced, median' },
] as const;

/** Every setting, plain and enhanced, on the same peaks. */
export function ErrorTable({ validation }: { validation: Validation }) {
  const [weight, setWeight] = useState<GustErrors['weight']>('observation');
  const { label, toUnit } = useUnits();
  return (
    <Card
      padded={false}
      title="Errors of the scored peaks"
      aside={
        <Segmented
          label="What counts alike"
          value={weight}
          onChange={setWeight}
          options={[
            { value: 'observation', label: 'Each place alike' },
            { value: 'storm', label: 'Each storm alike' },
          ]}
        />
      }
    >
      <Table label="Errors of the scored peaks by setting" className="mt-2">
        <thead>
          <tr>
            <Th>Setting</Th>
            <Th numeric>Bias</Th>
            <Th numeric className="whitespace-normal!">
              Mean absolute error
            </Th>
            <Th numeric priority={2}>
              RMSE, {label}
            </Th>
            <Th numeric priority={2}>
              Scatter
            </Th>
            <Th numeric priority={2}>
              Correlation
            </Th>
          </tr>
        </thead>
        <tbody>
          {validation.settings.flatMap(({ key, title }) =>
            LAYERS.map(({ layer, name }) => {
              const errors = errorsFor(validation, { settings: key, layer, weight });
              return (
                <Tr key={`${key} ${layer}`}>
                  <Td className="min-w-36 py-1">
                    <b>{title}</b>
                    <span className="block text-12 text-ink-2">{name}</span>
                  </Td>
                  <Figure value={signedShare(errors.bias.value)} interval={shareRange(errors.bias)} />
                  <Figure value={share(errors.meanAbsolute.value)} interval={shareRange(errors.meanAbsolute)} />
                  <Figure
                    priority={2}
                    value={decimal(toUnit(errors.rmseMs.value), 1)}
                    interval={figureRange(errors.rmseMs, toUnit, 1)}
                  />
                  <Figure priority={2} value={share(errors.scatter.value)} interval={shareRange(errors.scatter)} />
                  <Figure
                    priority={2}
                    value={errors.correlation ? decimal(errors.correlation.value, 2) : '–'}
                    interval={errors.correlation && figureRange(errors.correlation, (value) => value, 2)}
                  />
                </Tr>
              );
            }),
          )}
        </tbody>
      </Table>
      <ul className="border-t border-rule px-4 py-2.5 text-13 text-ink-2">
        {validation.settings.map(({ key, title, meaning }) => (
          <li key={key}>
            <b className="text-ink">{title}.</b> {meaning}
          </li>
        ))}
      </ul>
    </Card>
  );
}

const figureRange = ({ low, high }: Resampled, convert: (value: number) => number, digits: number) =>
  low === null || high === null ? null : range(decimal(convert(low), digits), decimal(convert(high), digits));

export function Figure({
  value,
  interval,
  priority,
}: {
  value: string;
  interval: string | null;
  priority?: 1 | 2 | 3;
}) {
  return (
    <Td numeric priority={priority} className="py-1 whitespace-nowrap">
      {value}
      {interval && <span className="block text-12 text-ink-2">{interval}</span>}
    </Td>
  );
}
