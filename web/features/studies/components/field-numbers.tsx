import type { WindFieldReply } from '#contract/studies.ts';
import { decimal, signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { compass } from '../../../ui/charts/compass.ts';
import {
  bearingOf,
  distanceOf,
  sideOf,
  strongestPlace,
  windAt,
  type FieldPlace,
  type FieldWind,
} from '../../../ui/charts/field-grid.ts';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';

interface NumbersProps {
  a: WindFieldReply;
  /** Null when nothing departs from the defaults. */
  b: WindFieldReply | null;
}

interface Line {
  term: string;
  of: (reply: WindFieldReply) => string;
  /** Left out where a difference says nothing. */
  number?: (reply: WindFieldReply) => number;
  decimals?: number;
}

function Lines({ label, lines, a, b }: NumbersProps & { label: string; lines: readonly Line[] }) {
  return (
    <Table label={label}>
      <thead>
        <tr>
          <Th />
          <Th numeric>{b ? 'A, default' : 'Default'}</Th>
          {b && <Th numeric>B</Th>}
          {b && <Th numeric>B − A</Th>}
        </tr>
      </thead>
      <tbody className="text-13">
        {lines.map(({ term, of, number, decimals = 1 }) => (
          <Tr key={term}>
            <th scope="row" className="h-8 px-4 text-left font-normal text-ink-2">
              {term}
            </th>
            <Td numeric className="h-8 whitespace-nowrap">
              {of(a)}
            </Td>
            {b && (
              <Td numeric className="h-8 whitespace-nowrap">
                {of(b)}
              </Td>
            )}
            {b && (
              <Td numeric className="h-8 font-bold whitespace-nowrap">
                {number ? signed(number(b) - number(a), decimals) : ''}
              </Td>
            )}
          </Tr>
        ))}
      </tbody>
    </Table>
  );
}

/** Where the cursor stands: distance, bearing and side, wind, direction and gust. */
export function CursorNumbers({ a, b, cursor, id }: NumbersProps & { cursor: FieldPlace; id: string }) {
  const { gust, label, toUnit } = useUnits();
  const wind = (reply: WindFieldReply): FieldWind => windAt(reply.field, cursor);
  const place = `${decimal(distanceOf(cursor) / 1000, 0)} km ${compass(bearingOf(cursor))} of the centre, ${
    distanceOf(cursor) < 500 ? 'in it' : sideOf(cursor, a.state.headingDeg)
  }`;
  const spoken = (reply: WindFieldReply) => {
    const { seaWindMs, directionDeg, gustMs } = wind(reply);
    return `sea wind ${gust(seaWindMs)} from ${compass(directionDeg)}, gust ${gust(gustMs)} ${label}`;
  };
  return (
    <section aria-label="Under the cursor" className="rounded-3 border border-rule bg-sheet shadow-1">
      <header className="px-4 pt-3 pb-1.5">
        <h3 className="text-15">Under the cursor</h3>
        <p className="text-13 text-ink-2">{place}</p>
        <p id={id} className="sr-only" aria-live="polite">
          {place}: {b ? `A ${spoken(a)}; B ${spoken(b)}` : spoken(a)}
        </p>
      </header>
      <Lines
        label="Wind under the cursor"
        {...{ a, b }}
        lines={[
          {
            term: `Gust, 3-s, ${label}`,
            of: (reply) => gust(wind(reply).gustMs),
            number: (reply) => toUnit(wind(reply).gustMs),
          },
          {
            term: `Sea wind, 10-min, ${label}`,
            of: (reply) => gust(wind(reply).seaWindMs),
            number: (reply) => toUnit(wind(reply).seaWindMs),
          },
          { term: 'Wind from', of: (reply) => compass(wind(reply).directionDeg) },
        ]}
      />
    </section>
  );
}

const side = (reply: WindFieldReply) => {
  const place = strongestPlace(reply.field);
  return `${decimal(distanceOf(place) / 1000, 0)} km ${compass(bearingOf(place))}`;
};

/** The storm at this time, in figures: what the picture says without being seen. */
export function StormNumbers({ a, b }: NumbersProps) {
  const { gust, label, toUnit } = useUnits();
  const strongest = (reply: WindFieldReply) => windAt(reply.field, strongestPlace(reply.field)).gustMs;
  const { state } = a;
  return (
    <section aria-label="The storm at this time" className="rounded-3 border border-rule bg-sheet shadow-1">
      <header className="px-4 pt-3 pb-1.5">
        <h3 className="text-15">The storm at this time</h3>
        <p className="text-13 text-ink-2">
          {decimal(Math.abs(state.latitude), 2)}° {state.latitude < 0 ? 'S' : 'N'},{' '}
          {decimal(Math.abs(state.longitude), 2)}° {state.longitude < 0 ? 'W' : 'E'}; moving {compass(state.headingDeg)}{' '}
          at {gust(state.translationMs)} {label}
          {state.hoursInland > 0 && `; ${decimal(state.hoursInland, 1)} h inland`}
        </p>
      </header>
      <Lines
        label="The storm at this time"
        {...{ a, b }}
        lines={[
          {
            term: `Strongest gust, ${label}`,
            of: (reply) => gust(strongest(reply)),
            number: (reply) => toUnit(strongest(reply)),
          },
          { term: 'Where from the centre', of: side },
          {
            term: `Max. 1-min wind, ${label}`,
            of: (reply) => gust(reply.state.maxWindMs),
            number: (reply) => toUnit(reply.state.maxWindMs),
          },
          {
            term: 'Radius of max. wind, km',
            of: (reply) => decimal(reply.state.radiusOfMaxWindM / 1000, 1),
            number: (reply) => reply.state.radiusOfMaxWindM / 1000,
          },
          {
            term: 'Shape B',
            of: (reply) => decimal(reply.state.shapeB, 2),
            number: (reply) => reply.state.shapeB,
            decimals: 2,
          },
          {
            term: 'Pressure deficit, hPa',
            of: (reply) => decimal(reply.state.pressureDeficitPa / 100, 1),
            number: (reply) => reply.state.pressureDeficitPa / 100,
          },
        ]}
      />
    </section>
  );
}
