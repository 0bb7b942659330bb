import { useUnits } from '../../lib/units.tsx';
import { WIND_UNIT_LABELS, WIND_UNITS } from '../../lib/wind-units.ts';
import { Segmented } from '../segmented.tsx';

const OPTIONS = WIND_UNITS.map((value) => ({ value, label: WIND_UNIT_LABELS[value] }));

export function UnitSwitch({ className }: { className?: string }) {
  const { unit, setUnit } = useUnits();
  return <Segmented label="Wind unit" value={unit} options={OPTIONS} onChange={setUnit} className={className} />;
}
