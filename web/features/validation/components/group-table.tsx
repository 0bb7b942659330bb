import type { GustErrors, Validation } from '#contract/validation.ts';
import { Card } from '../../../ui/card.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { errorsFor, namesOf, share, shareRange, signedShare } from '../validation-words.ts';
import { Figure } from './error-table.tsx';

interface GroupTableProps {
  validation: Validation;
  title: string;
  group: Exclude<GustErrors['group'], 'all'>;
  nameHeader: string;
  name: (key: string) => string;
}

/** Plain errors by storm or by source class, the default beside the wind. */
export function GroupTable({ validation, title, group, nameHeader, name }: GroupTableProps) {
  return (
    <Card padded={false} title={title} aside="plain">
      <Table label={title} className="mt-2">
        <thead>
          <tr>
            <Th>{nameHeader}</Th>
            <Th numeric>Peaks</Th>
            <Th numeric className="whitespace-normal!">
              Bias, pressure
            </Th>
            <Th numeric className="whitespace-normal!">
              Mean error, pressure
            </Th>
            <Th numeric priority={2}>
              Bias, wind
            </Th>
            <Th numeric priority={2}>
              Mean error, wind
            </Th>
          </tr>
        </thead>
        <tbody>
          {namesOf(validation, group)
            .filter((key) => key !== '')
            .map((key) => {
              const errors = errorsFor(validation, { settings: 'default', group, name: key });
              const byWind = errorsFor(validation, { settings: 'wind', group, name: key });
              return (
                <Tr key={key}>
                  <Td className="py-1.5 font-bold">{name(key)}</Td>
                  <Td numeric>{errors.count}</Td>
                  <Figure value={signedShare(errors.bias.value)} interval={shareRange(errors.bias)} />
                  <Figure value={share(errors.meanAbsolute.value)} interval={shareRange(errors.meanAbsolute)} />
                  <Figure priority={2} value={signedShare(byWind.bias.value)} interval={shareRange(byWind.bias)} />
                  <Figure
                    priority={2}
                    value={share(byWind.meanAbsolute.value)}
                    interval={shareRange(byWind.meanAbsolute)}
                  />
                </Tr>
              );
            })}
        </tbody>
      </Table>
      <p className="border-t border-rule px-4 py-2 text-13 text-ink-2">
        No range where there are fewer than three peaks.
      </p>
    </Card>
  );
}
