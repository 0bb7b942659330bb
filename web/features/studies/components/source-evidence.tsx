import { Link } from 'react-router-dom';
import type { GustErrors, Validation } from '#contract/validation.ts';
import { counted, signed } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';

const SHOWN = ['default', 'relation-width', 'wind'] as const satisfies readonly GustErrors['settings'][];

/** How both sources fare against observed peak gusts: the reason for the default, in figures. */
export function SourceEvidence({ validation }: { validation: Validation }) {
  const rows = SHOWN.flatMap((settings) =>
    validation.errors.filter(
      (errors) =>
        errors.settings === settings &&
        errors.layer === 'plain' &&
        errors.rows === 'peaks' &&
        errors.group === 'all' &&
        errors.weight === 'observation',
    ),
  );
  const first = rows[0];
  const title = (settings: GustErrors['settings']) => validation.settings.find(({ key }) => key === settings)?.title;
  return (
    <>
      <table className="mt-1 w-full border-collapse text-13">
        <thead>
          <tr className="text-12 text-ink-2">
            <th scope="col" className="py-1 pl-4.5 text-left font-normal">
              Plain peak gusts, untuned
              {first && `: ${counted(first.count, 'peak')} of ${counted(first.storms, 'storm')}`}
            </th>
            <th scope="col" className="px-2 py-1 text-right font-normal">
              Bias
            </th>
            <th scope="col" className="py-1 pr-4.5 pl-2 text-right font-normal whitespace-nowrap">
              Mean error
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map(({ settings, bias, meanAbsolute }) => (
            <tr key={settings} className="border-t border-rule">
              <th scope="row" className="py-1 pl-4.5 text-left font-normal">
                {title(settings)}
              </th>
              <td className="px-2 py-1 text-right whitespace-nowrap">{signed(bias.value * 100, 0)} %</td>
              <td className="py-1 pr-4.5 pl-2 text-right whitespace-nowrap">
                {Math.round(meanAbsolute.value * 100)} %
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="px-4.5 pt-1.5 pb-3 text-12 text-ink-2">
        <Link to={paths.validation()} className="font-bold">
          Every station, and the limits of these data
        </Link>
      </p>
    </>
  );
}
