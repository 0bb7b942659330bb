import type { Validation } from '#contract/validation.ts';
import { Card } from '../../../ui/card.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { share, signedShare } from '../validation-words.ts';

/** The same peaks with one reading of the data changed at a time. */
export function ReadingsTable({ validation }: { validation: Validation }) {
  return (
    <Card padded={false} title="How much the reading of the data matters" aside="pressure, plain">
      <Table label="Errors under other readings of the data" className="mt-2">
        <thead>
          <tr>
            <Th>Reading, changed alone</Th>
            <Th numeric>Bias</Th>
            <Th numeric>Mean error</Th>
          </tr>
        </thead>
        <tbody>
          {validation.readings.map(({ title, bias, meanAbsolute }) => (
            <Tr key={title}>
              <Td className="min-w-44 py-1.5">{title}</Td>
              <Td numeric className="whitespace-nowrap">
                {signedShare(bias)}
              </Td>
              <Td numeric className="whitespace-nowrap">
                {share(meanAbsolute)}
              </Td>
            </Tr>
          ))}
        </tbody>
      </Table>
    </Card>
  );
}
