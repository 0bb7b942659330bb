import { createContext, useCallback, useContext, useMemo, useState, type ReactNode } from 'react';
import { useSearchParams } from 'react-router-dom';
import { gustRangeText, gustText } from './gusts.ts';
import { fromMetresPerSecond, isWindUnit, toMetresPerSecond, WIND_UNIT_LABELS, type WindUnit } from './wind-units.ts';

interface Units {
  unit: WindUnit;
  /** "m/s", "mph", "km/h" or "kt". */
  label: string;
  setUnit: (unit: WindUnit) => void;
  /** A gust in the chosen unit, without the unit: it stands in the header. */
  gust: (speedMs: number) => string;
  gustRange: (lowMs: number, highMs: number) => string;
  toUnit: (speedMs: number) => number;
  fromUnit: (speed: number) => number;
}

const UnitsContext = createContext<Units | null>(null);

const storageKey = (personId: string) => `gustloom.unit.${personId}`;

/** The unit of a shared link wins, then what this person chose last, then m/s. */
export function UnitsProvider({ personId, children }: { personId: string; children: ReactNode }) {
  const [search, setSearch] = useSearchParams();
  const [chosen, setChosen] = useState(() => localStorage.getItem(storageKey(personId)));
  const shared = search.get('unit');
  const unit: WindUnit = isWindUnit(shared) ? shared : isWindUnit(chosen) ? chosen : 'ms';

  const setUnit = useCallback(
    (next: WindUnit) => {
      localStorage.setItem(storageKey(personId), next);
      setChosen(next);
      setSearch(
        (before) => {
          const after = new URLSearchParams(before);
          after.set('unit', next);
          return after;
        },
        { replace: true, preventScrollReset: true },
      );
    },
    [personId, setSearch],
  );

  const units = useMemo<Units>(
    () => ({
      unit,
      label: WIND_UNIT_LABELS[unit],
      setUnit,
      gust: (speedMs) => gustText(speedMs, unit),
      gustRange: (lowMs, highMs) => gustRangeText(lowMs, highMs, unit),
      toUnit: (speedMs) => fromMetresPerSecond(speedMs, unit),
      fromUnit: (speed) => toMetresPerSecond(speed, unit),
    }),
    [unit, setUnit],
  );
  return <UnitsContext value={units}>{children}</UnitsContext>;
}

export function useUnits(): Units {
  const units = useContext(UnitsContext);
  if (!units) throw new Error('useUnits needs a UnitsProvider above it');
  return units;
}
