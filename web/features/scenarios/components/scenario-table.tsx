import { Play } from 'lucide-react';
import { Link, useNavigate } from 'react-router-dom';
import type { ScenarioSummary } from '#contract/scenarios.ts';
import { clock, day, shortDay } from '../../../lib/dates.ts';
import { count } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { paths } from '../../../paths.ts';
import { ButtonLink } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { TrackThumbnail } from '../../../ui/map/track-thumbnail.tsx';
import { StaleChip } from '../../../ui/stale-chip.tsx';
import { SkeletonRows, Table, TableBanner, Td, Th, Tr } from '../../../ui/table.tsx';

interface ScenarioTableProps {
  scenarios: readonly ScenarioSummary[];
  loading: boolean;
  canRun: boolean;
  failedMore?: (() => void) | undefined;
}

export function ScenarioTable({ scenarios, loading, canRun, failedMore }: ScenarioTableProps) {
  const { gust, label } = useUnits();
  const navigate = useNavigate();
  return (
    <Card padded={false} className="overflow-hidden">
      {failedMore && <TableBanner onRetry={failedMore}>The next scenarios didn’t load.</TableBanner>}
      <Table label="Scenarios">
        <thead>
          <tr>
            <Th priority={2} className="w-36">
              Track
            </Th>
            <Th>Scenario</Th>
            <Th numeric>Strongest wind, {label}</Th>
            <Th priority={3}>Times, UTC</Th>
            <Th numeric priority={3}>
              Fixes
            </Th>
            <Th priority={3}>Source</Th>
            <Th priority={2}>Changed</Th>
            {canRun && (
              <Th priority={2}>
                <span className="sr-only">Use</span>
              </Th>
            )}
          </tr>
        </thead>
        <tbody>
          {loading ? (
            <SkeletonRows columns={canRun ? 8 : 7} rows={5} />
          ) : (
            scenarios.map((scenario) => (
              <Tr key={scenario.id} onClick={() => void navigate(paths.scenario(scenario.id))}>
                <Td priority={2} className="py-2">
                  <TrackThumbnail paths={[scenario.path]} label={`Track of ${scenario.name}`} width={124} height={72} />
                </Td>
                <Td className="max-rail:py-2.5">
                  <Link
                    to={paths.scenario(scenario.id)}
                    className="text-15 font-bold text-ink no-underline hover:underline"
                    onClick={(event) => event.stopPropagation()}
                  >
                    {scenario.name}
                  </Link>
                  <span className="block text-13 text-ink-2">
                    version {scenario.version}, {scenario.hemisphere}ern hemisphere
                  </span>
                  {scenario.stale && (
                    <span className="mt-1 block">
                      <StaleChip stale={scenario.stale} />
                    </span>
                  )}
                  {scenario.description && (
                    <span className="block max-w-90 truncate text-13 text-ink-2">{scenario.description}</span>
                  )}
                </Td>
                <Td numeric>{gust(scenario.maxWindMs)}</Td>
                <Td priority={3} className="text-13 whitespace-nowrap">
                  {shortDay(scenario.firstTime)} {clock(scenario.firstTime)} to
                  <br />
                  {day(scenario.lastTime)} {clock(scenario.lastTime)}
                </Td>
                <Td numeric priority={3}>
                  {count(scenario.fixes)}
                </Td>
                <Td priority={3} className="max-w-56 text-13">
                  <span className="line-clamp-2">{scenario.source || 'not stated'}</span>
                  {scenario.asOf && (
                    <span className="mt-1 block text-ink-2">
                      as of {day(scenario.asOf)} {clock(scenario.asOf)}
                    </span>
                  )}
                </Td>
                <Td priority={2} className="text-13 whitespace-nowrap">
                  {day(scenario.updatedAt)}
                  <span className="block text-ink-2">{scenario.updatedBy}</span>
                </Td>
                {canRun && (
                  <Td priority={2} className="text-right">
                    <ButtonLink
                      size="small"
                      icon={Play}
                      to={paths.newRun({ scenario: scenario.versionId })}
                      onClick={(event) => event.stopPropagation()}
                    >
                      Use in a run
                    </ButtonLink>
                  </Td>
                )}
              </Tr>
            ))
          )}
        </tbody>
      </Table>
    </Card>
  );
}
