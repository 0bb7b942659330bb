import { useState } from 'react';
import type { ResolvedFix } from '#contract/scenarios.ts';
import { decimal } from '../../../lib/numbers.ts';
import { TextField } from '../../../ui/field.tsx';
import type { DraftFix } from '../track-draft.ts';

interface FixDetailsProps {
  fix: DraftFix;
  resolved: ResolvedFix | undefined;
  number: number;
  readOnly: boolean;
  onChange: (value: Partial<DraftFix>) => void;
}

type Key = 'ambientPressureHpa' | 'ringWidthFraction' | 'eyeVorticityRatio' | 'hoursInland';
const FIELDS: readonly { key: Key; label: string; unit?: string; low: number; high: number }[] = [
  { key: 'ambientPressureHpa', label: 'Pressure outside', unit: 'hPa', low: 950, high: 1040 },
  { key: 'ringWidthFraction', label: 'Ring width by radius', low: 0, high: 1 },
  { key: 'eyeVorticityRatio', label: 'Eye vorticity ratio', low: 0, high: 1 },
  { key: 'hoursInland', label: 'Hours inland', unit: 'h', low: 0, high: 1000 },
];
const RADII = [
  { field: 'radius34KtM', knots: 34 },
  { field: 'radius50KtM', knots: 50 },
  { field: 'radius64KtM', knots: 64 },
] as const;

/** Which radii the fix holds, said on the folded line. */
const radiiNote = (fix: DraftFix): string => {
  const given = RADII.filter(({ field }) => fix[field]?.some((radius) => radius > 0)).map(({ knots }) => `${knots}`);
  return given.length === 0 ? '' : ` (${given.join(', ')} kt given)`;
};

const QUADRANTS = ['NE', 'SE', 'SW', 'NW'] as const;

const numberIn = (text: string): number | null | undefined => {
  if (text.trim() === '') return null;
  const value = Number(text.replace(',', '.'));
  return Number.isFinite(value) ? value : undefined;
};

/** What seldom changes from fix to fix: folded away until wanted. */
export function FixDetails({ fix, resolved, number, readOnly, onChange }: FixDetailsProps) {
  return (
    <details className="rounded-3 border border-rule bg-sheet shadow-1">
      <summary className="px-4 py-2.5 text-13 font-bold">
        More of fix {number}: pressure outside, 34, 50 and 64-kt radii, ring, hours inland{radiiNote(fix)}
      </summary>
      <div className="grid grid-cols-4 gap-3 border-t border-rule p-4 max-rail:grid-cols-2" key={number}>
        {FIELDS.map(({ key, label, unit, low, high }) => (
          <NumberEntry
            key={key}
            label={label}
            unit={unit}
            value={fix[key]}
            low={low}
            high={high}
            filled={resolved?.filled[key]}
            readOnly={readOnly}
            onValue={(value) => onChange({ [key]: value })}
          />
        ))}
        {RADII.map(({ field, knots }) =>
          QUADRANTS.map((quadrant, index) => (
            <NumberEntry
              key={`${field} ${quadrant}`}
              label={`${knots}-kt radius, ${quadrant}`}
              unit="km"
              value={fix[field] === null ? null : fix[field][index]! / 1000}
              low={0}
              high={2000}
              filled={undefined}
              readOnly={readOnly}
              onValue={(km) => {
                const radii = [...(fix[field] ?? [0, 0, 0, 0])] as [number, number, number, number];
                radii[index] = (km ?? 0) * 1000;
                onChange({ [field]: radii.every((radius) => radius === 0) ? null : radii });
              }}
            />
          )),
        )}
      </div>
    </details>
  );
}

interface NumberEntryProps {
  label: string;
  unit?: string | undefined;
  value: number | null;
  low: number;
  high: number;
  filled: string | undefined;
  readOnly: boolean;
  onValue: (value: number | null) => void;
}

function NumberEntry({ label, unit, value, low, high, filled, readOnly, onValue }: NumberEntryProps) {
  const [text, setText] = useState<string | null>(null);
  const parsed = text === null ? value : numberIn(text);
  const outside = typeof parsed === 'number' && (parsed < low || parsed > high);
  const fault =
    parsed === undefined
      ? 'Type a number.'
      : outside
        ? `Between ${decimal(low, 0)} and ${decimal(high, 0)}.`
        : undefined;
  return (
    <TextField
      label={label}
      unit={unit}
      inputMode="decimal"
      readOnly={readOnly}
      value={text ?? (value === null ? '' : String(Math.round(value * 1000) / 1000))}
      hint={value === null && filled ? <span className="text-caution">filled: {filled}</span> : undefined}
      error={fault}
      onChange={(event) => setText(event.target.value)}
      onBlur={() => {
        if (text === null || parsed === undefined || outside) return;
        if (parsed !== value) onValue(parsed);
        setText(null);
      }}
    />
  );
}
