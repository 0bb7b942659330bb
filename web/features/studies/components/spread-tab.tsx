import { useEffect, useRef, useState, type ReactNode } from 'react';
import { useQuery, useQueryClient } from '@tanstack/react-query';
import { ChartNoAxesColumn, Download, Play, Square, Table2 } from 'lucide-react';
import type { ChainSettings, SpreadReply } from '#contract/studies.ts';
import { failureOf } from '../../../api/failure.ts';
import { classNames } from '../../../lib/class-names.ts';
import { count, counted } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Button, ButtonLink } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { saveText } from '../../../ui/charts/chart-frame.tsx';
import { SelectField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';
import { withValue } from '../chain-settings.ts';
import { spreadCsv } from '../spread-file.ts';
import { spreadQuery } from '../study-queries.ts';
import { Departures } from './departures.tsx';
import { IntensityCard } from './intensity-card.tsx';
import { SpreadHeadline } from './spread-headline.tsx';
import { SpreadTable } from './spread-table.tsx';
import { SwitchRows } from './switch-rows.tsx';

export interface SpreadEdition {
  editionId: string;
  name: string;
  sites: number;
}

interface SpreadTabProps {
  scenario: { scenarioId: string; name: string; number: number };
  editions: readonly SpreadEdition[];
  editionId: string | null;
  onEdition: (editionId: string) => void;
  /** The base round which one switch at a time is tried. */
  settings: ChainSettings;
  onSettings: (settings: ChainSettings) => void;
  evidence?: ReactNode;
}

/** Which setting moves the answer, and by how much. */
export function SpreadTab(props: SpreadTabProps) {
  const { scenario, editions, editionId, onEdition, settings, onSettings, evidence } = props;
  const [asked, setAsked] = useState(false);
  const [asTable, setAsTable] = useState(false);
  const client = useQueryClient();
  const options = spreadQuery({
    scenarioId: scenario.scenarioId,
    version: scenario.number,
    editionId,
    settings,
    asked,
  });
  const query = useQuery(options);
  const reply = query.data;
  const stale = reply !== undefined && !query.isPlaceholderData && reply.scenario.version !== scenario.number;
  const working = query.isFetching;
  const run = () => {
    if (asked) void query.refetch();
    else setAsked(true);
  };
  const stop = () => {
    setAsked(false);
    void client.cancelQueries({ queryKey: options.queryKey });
  };
  const change = (next: ChainSettings) => {
    setAsked(true);
    onSettings(next);
  };

  if (editions.length === 0) return <NoEdition />;
  return (
    <div className="flex flex-col gap-3.5">
      <div className="flex flex-wrap items-center gap-x-3 gap-y-2.5">
        <span aria-hidden className="text-13 font-bold">
          At the sites of
        </span>
        <SelectField
          label="At the sites of"
          labelHidden
          className="w-96 max-rail:w-full"
          value={editionId ?? ''}
          onChange={(event) => onEdition(event.target.value)}
        >
          {editionId === null && <option value="">Choose an edition</option>}
          {editions.map((edition) => (
            <option key={edition.editionId} value={edition.editionId}>
              {edition.name}, {counted(edition.sites, 'site')}
            </option>
          ))}
        </SelectField>
        {(reply === undefined || stale || query.isError) && !working && (
          <Button
            variant="filled"
            icon={Play}
            disabledReason={editionId === null ? 'choose an edition first' : undefined}
            onClick={run}
          >
            {stale ? 'Run the spread again' : 'Run the spread'}
          </Button>
        )}
        {reply && (
          <div className="ml-auto flex gap-2 max-rail:ml-0 max-rail:w-full max-rail:[&>*]:flex-1">
            <Button
              icon={asTable ? ChartNoAxesColumn : Table2}
              aria-pressed={asTable}
              onClick={() => setAsTable(!asTable)}
            >
              Table
            </Button>
            <Button
              icon={Download}
              onClick={() =>
                saveText(`${scenario.name}-v${reply.scenario.version}-settings.csv`, spreadCsv(reply), 'text/csv')
              }
            >
              Download
            </Button>
          </div>
        )}
      </div>
      <Departures settings={settings} onChange={change} />
      {working && <Working onStop={stop} />}
      {query.isError && !working && (
        <ProblemNotice
          title="The spread wasn’t worked out"
          {...failureOf(query.error)}
          onRetry={() => query.refetch()}
        />
      )}
      {stale && (
        <Message tone="event" title={`Made on version ${reply.scenario.version}; version ${scenario.number} is saved.`}>
          <p>What stands here is still that of the older track. Run the spread again to see the newer one.</p>
        </Message>
      )}
      {reply ? (
        <div aria-busy={working} className={classNames(query.isPlaceholderData && 'opacity-60')}>
          <Results {...{ reply, stale, asTable, evidence }} onSettings={change} />
        </div>
      ) : (
        !working && !query.isError && <WhatItDoes />
      )}
    </div>
  );
}

interface ResultsProps {
  reply: SpreadReply;
  stale: boolean;
  asTable: boolean;
  evidence: ReactNode;
  onSettings: (settings: ChainSettings) => void;
}

function Results({ reply, stale, asTable, evidence, onSettings }: ResultsProps) {
  const { sites } = reply;
  if (sites.used === 0)
    return (
      <Card title="Nothing in reach">
        <p className="text-ink-2">
          None of the {count(sites.of)} sites lies within 1,000 km of this track, so no setting can move anything.
          Choose another edition, or look at the wind field.
        </p>
      </Card>
    );
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_23.25rem] items-start gap-3.5 max-xl:grid-cols-1">
      <div className="flex min-w-0 flex-col gap-3.5">
        <SpreadHeadline reply={reply} stale={stale} />
        {asTable ? (
          <SpreadTable reply={reply} />
        ) : (
          <SwitchRows
            reply={reply}
            onTry={(row) => {
              const next = withValue(reply.settings, row.choice, row.to.value);
              if (next) onSettings(next);
            }}
          />
        )}
        <p className="text-12 text-ink-2">
          {sites.rule} Curve {reply.curve}. Track version {reply.scenario.version}, engine{' '}
          {reply.engineVersion.slice(0, 8)}. Free, stored nowhere, and no substitute for a run.
        </p>
      </div>
      <IntensityCard
        reply={reply}
        evidence={evidence}
        onIntensity={(intensity) => onSettings({ ...reply.settings, intensity })}
      />
    </div>
  );
}

/** Says that it goes on, for how long, and stops it. */
function Working({ onStop }: { onStop: () => void }) {
  const [seconds, setSeconds] = useState(0);
  const begun = useRef(0);
  useEffect(() => {
    begun.current = performance.now();
    const timer = setInterval(() => setSeconds(Math.round((performance.now() - begun.current) / 1000)), 1000);
    return () => clearInterval(timer);
  }, []);
  return (
    <div className="flex items-center gap-3 rounded-2 border border-rule bg-sheet px-3.5 py-2.5 text-13">
      <div className="min-w-0 flex-1">
        <p role="status">
          <b>Trying one switch at a time.</b> It takes some seconds; leaving this tab stops it.
        </p>
        <ProgressBar label="Spread of the settings" done={seconds} total={null} className="mt-2" />
      </div>
      <span aria-hidden className="text-ink-2">
        {seconds} s
      </span>
      <Button size="small" icon={Square} onClick={onStop}>
        Stop
      </Button>
    </div>
  );
}

function WhatItDoes() {
  return (
    <Card title="What will stand here">
      <p className="max-w-160 text-ink-2">
        The gross range and the strongest gust with the settings as they are, then what each setting does when it alone
        is changed: by how much the strongest gust moves, by how much the event’s gross. The 200 largest values within
        reach are taken. It is free and stored nowhere.
      </p>
    </Card>
  );
}

function NoEdition() {
  return (
    <Card title="No edition is sealed yet">
      <p className="mb-3 max-w-160 text-ink-2">
        What a setting does to a loss depends on the sites. Upload a schedule, mend what is held and seal it; then each
        setting can be tried at its sites. The wind field needs no sites.
      </p>
      <ButtonLink variant="filled" to={paths.portfolios()}>
        To Portfolios
      </ButtonLink>
    </Card>
  );
}
