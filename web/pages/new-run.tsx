import { useEffect, useMemo, useRef, useState } from 'react';
import { useQuery, useSuspenseQueries } from '@tanstack/react-query';
import { Lock } from 'lucide-react';
import { redirect, useNavigate, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { UNDERWRITERS } from '#contract/roles.ts';
import { newIdempotencyKey } from '../api/idempotency-key.ts';
import { BeforeAccepting } from '../features/runs/components/before-accepting.tsx';
import { ChoiceDialog } from '../features/runs/components/choice-dialog.tsx';
import { OptionsStep } from '../features/runs/components/options-step.tsx';
import { QuoteCard, quoteInShort, standingOf } from '../features/runs/components/quote-card.tsx';
import { SetupStep } from '../features/runs/components/setup-step.tsx';
import {
  calibrationsQuery,
  curveSetsQuery,
  editionChoicesQuery,
  quoteQuery,
  scenarioChoicesQuery,
  scenarioDetailQuery,
  useAcceptQuote,
  useCreateQuote,
} from '../features/runs/run-queries.ts';
import {
  DEFAULT_OPTIONS,
  departures,
  editionChoices,
  isSameRequest,
  openChoice,
  PURPOSES,
  requestOf,
  setupOf,
  strongestOf,
  usualCalibration,
  usualCurveSet,
  type RunSetup,
} from '../features/runs/run-setup.ts';
import { requireSession } from '../features/session/guard.ts';
import { holdsOneOf } from '../features/session/session-queries.ts';
import { day } from '../lib/dates.ts';
import { exactMoney, shortMoney } from '../lib/money.ts';
import { count, counted } from '../lib/numbers.ts';
import { useNow } from '../lib/use-now.ts';
import { useUnits } from '../lib/units.tsx';
import { paths } from '../paths.ts';
import { queryClient } from '../query-client.ts';
import { Button, ButtonLink } from '../ui/button.tsx';
import { Chip } from '../ui/chip.tsx';
import { TextField } from '../ui/field.tsx';
import { TrackThumbnail } from '../ui/map/track-thumbnail.tsx';
import { Page } from '../ui/page.tsx';
import { Segmented } from '../ui/segmented.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async (context: LoaderFunctionArgs) => {
  const session = await requireSession(context);
  if (session instanceof Response) return session;
  if (!holdsOneOf(session, UNDERWRITERS)) return redirect(paths.runs());
  const quoteId = new URL(context.request.url).searchParams.get('quote');
  await Promise.all([
    queryClient.ensureQueryData(editionChoicesQuery()),
    queryClient.ensureQueryData(scenarioChoicesQuery()),
    queryClient.ensureQueryData(calibrationsQuery()),
    queryClient.ensureQueryData(curveSetsQuery()),
    quoteId ? queryClient.ensureQueryData(quoteQuery(quoteId)) : null,
  ]);
  return null;
};

type Choosing = 'edition' | 'scenarios' | 'calibration' | 'curves';
const MOST_TRACKS = 20;

export function Component() {
  const [search, setSearch] = useSearchParams();
  const quoteId = search.get('quote');
  const [{ data: portfolios }, { data: scenarioPage }, { data: calibrations }, { data: curveSets }] =
    useSuspenseQueries({
      queries: [editionChoicesQuery(), scenarioChoicesQuery(), calibrationsQuery(), curveSetsQuery()],
    });
  const { data: quote = null } = useQuery({ ...quoteQuery(quoteId ?? ''), enabled: quoteId !== null });
  const { gust, label } = useUnits();
  const now = useNow(10_000);
  const navigate = useNavigate();
  const [choosing, setChoosing] = useState<Choosing | null>(null);
  const createQuote = useCreateQuote();
  const acceptQuote = useAcceptQuote();

  const editions = useMemo(() => editionChoices(portfolios.items), [portfolios]);
  const [setup, setSetup] = useState<RunSetup>(() => {
    if (quote) return setupOf(quote.request);
    const calibration = usualCalibration(calibrations.items);
    const wished = search.get('scenario')?.split(',') ?? [];
    const only = editions.filter(({ isCurrent }) => isCurrent);
    return {
      editionId: search.get('edition') ?? (only.length === 1 ? only[0]!.editionId : null),
      scenarioVersionIds: scenarioPage.items.map(({ versionId }) => versionId).filter((id) => wished.includes(id)),
      calibrationId: calibration?.id ?? null,
      curveSetId: usualCurveSet(curveSets.items, calibration)?.id ?? null,
      options: DEFAULT_OPTIONS,
      purpose: 'exploratory',
      costCentre: '',
    };
  });
  const change = (part: Partial<RunSetup>) => setSetup((before) => ({ ...before, ...part }));

  const edition = editions.find(({ editionId }) => editionId === setup.editionId) ?? null;
  const scenarios = scenarioPage.items.filter(({ versionId }) => setup.scenarioVersionIds.includes(versionId));
  const calibration = calibrations.items.find(({ id }) => id === setup.calibrationId) ?? null;
  const curveSet = curveSets.items.find(({ id }) => id === setup.curveSetId) ?? null;
  const strongest = strongestOf(scenarios);
  const { data: strongestVersion } = useQuery(scenarioDetailQuery(strongest?.id ?? null));

  const request = requestOf(setup);
  const standing = quote && standingOf(quote, request !== null && isSameRequest(quote.request, request), now);
  // One key a quote: a second press, another tab or a retry starts no second run.
  const acceptKey = useRef<{ quoteId: string; key: string } | null>(null);

  const askQuote = () => {
    if (!request) return;
    acceptQuote.reset();
    createQuote.mutate(request, {
      onSuccess: ({ id }) =>
        setSearch(
          (before) => {
            const after = new URLSearchParams(before);
            after.delete('edition');
            after.delete('scenario');
            after.set('quote', id);
            return after;
          },
          { replace: true },
        ),
    });
  };
  const accept = () => {
    if (!quote) return;
    if (acceptKey.current?.quoteId !== quote.id) acceptKey.current = { quoteId: quote.id, key: newIdempotencyKey() };
    acceptQuote.mutate(
      { quoteId: quote.id, key: acceptKey.current.key },
      {
        onSuccess: (run) => void navigate(paths.run(run.id)),
        // What it says about the quote may have changed: expired, taken, balance spent elsewhere.
        onError: () => void queryClient.invalidateQueries({ queryKey: quoteQuery(quote.id).queryKey }),
      },
    );
  };

  useEffect(() => {
    const jump = (event: KeyboardEvent) => {
      const target = event.target as HTMLElement;
      if (event.ctrlKey && event.key === 'Enter') document.getElementById('accept-quote')?.focus();
      else if (/^[1-6]$/.test(event.key) && !target.closest('input, textarea, select, [role="dialog"]'))
        document.getElementById(`choice-${event.key}`)?.focus();
    };
    addEventListener('keydown', jump);
    return () => removeEventListener('keydown', jump);
  }, []);

  const title = edition ? `New run, ${edition.portfolioName}` : 'New run';
  return (
    <Page
      title={title}
      crumbs={[{ label: 'Runs', to: paths.runs() }, { label: 'New run' }]}
      sub="Checking, quoting and changing this page are free. Nothing starts until you accept."
      className="max-rail:pb-20"
    >
      <div className="grid grid-cols-[minmax(0,1fr)_388px] items-stretch gap-4 max-wide:grid-cols-1">
        <div className="flex min-w-0 flex-col gap-3.5">
          <ol aria-label="Choices of the run" className="rounded-3 border border-rule bg-sheet shadow-1">
            <SetupStep
              number={1}
              label="Edition"
              isOpen={!edition}
              title={edition ? `${edition.portfolioName}, edition ${edition.number}` : 'None chosen yet'}
              detail={
                edition ? (
                  <>
                    {edition.asAt && `As at ${day(edition.asAt)}. `}
                    {counted(edition.toScore, 'site')} to score, {count(edition.held)} held.{' '}
                    {shortMoney(edition.tivMinor, edition.currency)} TIV.
                  </>
                ) : (
                  'A run needs a sealed edition of a portfolio.'
                )
              }
              chip={
                edition && (
                  <Chip tone="done" icon={Lock} className="max-rail:hidden">
                    Sealed
                  </Chip>
                )
              }
              onChange={() => setChoosing('edition')}
            />
            <SetupStep
              number={2}
              label="Scenarios"
              isOpen={scenarios.length === 0}
              title={
                scenarios.length === 0
                  ? 'None chosen yet'
                  : scenarios.length === 1
                    ? `${scenarios[0]!.name}, version ${scenarios[0]!.version}`
                    : `${scenarios.length} tracks`
              }
              onChange={() => setChoosing('scenarios')}
            >
              {scenarios.length > 0 && (
                <div className="mt-1.5 flex items-start gap-4 max-rail:flex-col">
                  <ul className="min-w-0 flex-1 text-13">
                    {scenarios.map((scenario, index) => (
                      <li key={scenario.versionId} className="flex items-center gap-2.5 py-0.5">
                        <span
                          aria-hidden
                          className={`w-4 flex-none border-t-2 ${index === 0 ? 'border-ink' : 'border-dashed border-thread'}`}
                        />
                        <span className="min-w-0 flex-1 truncate">
                          {scenario.name}, version {scenario.version}
                        </span>
                        <span className="text-ink-2">
                          {gust(scenario.maxWindMs)} {label}
                        </span>
                        <span className="w-28 text-right whitespace-nowrap text-ink-2 max-rail:hidden">
                          {setup.options.mesovortices ? '264 vortex draws' : 'plain only'}
                        </span>
                      </li>
                    ))}
                  </ul>
                  <TrackThumbnail
                    paths={scenarios.map(({ path }) => path)}
                    label={`Tracks of ${scenarios.map(({ name }) => name).join(', ')}`}
                    width={236}
                    height={104}
                  />
                </div>
              )}
            </SetupStep>
            <SetupStep
              number={3}
              label="Calibration"
              isOpen={!calibration}
              title={calibration ? `${calibration.code}, version ${calibration.version}` : 'None chosen yet'}
              detail={
                calibration &&
                (calibration.signedBy && calibration.signedAt
                  ? `Signed by ${calibration.signedBy} on ${day(calibration.signedAt)}. ${calibration.note}`
                  : `Not signed: outputs are stamped. ${calibration.note}`)
              }
              chip={
                calibration &&
                (calibration.state === 'signed' ? (
                  <Chip tone="done" className="max-rail:hidden">
                    Signed
                  </Chip>
                ) : (
                  <Chip tone="caution">Not signed</Chip>
                ))
              }
              onChange={() => setChoosing('calibration')}
            />
            <SetupStep
              number={4}
              label="Curves and terms"
              isOpen={!curveSet}
              title={
                curveSet
                  ? `${curveSet.name}, version ${curveSet.version}${edition ? `; policy terms of edition ${edition.number}` : ''}`
                  : 'None chosen yet'
              }
              detail={curveSet && `${curveSet.note} Terms are applied across the damage spread.`}
              chip={
                curveSet && (
                  <Chip tone={curveSet.state === 'approved' ? 'done' : 'caution'} className="max-rail:hidden">
                    {curveSet.state === 'approved' ? 'Approved' : 'Draft'}
                  </Chip>
                )
              }
              onChange={() => setChoosing('curves')}
            />
            <SetupStep number={5} label="Options">
              <OptionsStep
                options={setup.options}
                onChange={(options) => change({ options })}
                strongest={
                  strongest && strongestVersion
                    ? { name: strongest.name, maxima: strongestVersion.resolution.maxima }
                    : null
                }
                departures={departures(setup.options, calibration)}
                calibration={calibration && `${calibration.code} version ${calibration.version}`}
              />
            </SetupStep>
            <SetupStep number={6} label="Purpose">
              <div className="mt-1 flex flex-wrap items-end gap-x-4 gap-y-3">
                <Segmented
                  label="Purpose"
                  value={setup.purpose}
                  options={PURPOSES}
                  onChange={(purpose) => change({ purpose })}
                  className="max-rail:grid max-rail:w-full max-rail:grid-cols-2"
                />
                <TextField
                  label="Cost centre"
                  aside="optional"
                  className="-mt-4.5 ml-auto w-48 max-rail:mt-0 max-rail:ml-0 max-rail:w-full"
                  value={setup.costCentre}
                  maxLength={64}
                  onChange={(event) => change({ costCentre: event.target.value })}
                />
              </div>
            </SetupStep>
          </ol>
          {edition && (
            <BeforeAccepting
              edition={edition}
              quote={standing === 'open' ? quote : null}
              calibration={calibration}
              curveSet={curveSet}
            />
          )}
        </div>
        <QuoteCard
          quote={quote}
          standing={standing}
          openChoice={openChoice(setup)}
          quoting={createQuote.isPending}
          accepting={acceptQuote.isPending || acceptQuote.isSuccess}
          quoteError={createQuote.error?.message ?? null}
          acceptError={acceptQuote.error?.message ?? null}
          onQuote={askQuote}
          onAccept={accept}
        />
      </div>
      {quote && standing === 'open' && quote.freeBalanceMinor >= quote.grossMinor && (
        <div className="fixed inset-x-0 bottom-[calc(3.625rem+2.875rem)] z-10 flex items-center gap-3 border-t border-rule-strong bg-sheet px-3.5 py-2 shadow-3 rail:hidden">
          <span className="min-w-0 flex-1 text-12 text-ink-2">{quoteInShort(quote)}</span>
          <Button variant="filled" pending={acceptQuote.isPending} onClick={accept}>
            Accept and run, {exactMoney(quote.grossMinor, quote.currency)}
          </Button>
        </div>
      )}
      {choosing === 'edition' && (
        <ChoiceDialog
          title="Which edition?"
          choices={editions.map((choice) => ({
            id: choice.editionId,
            title: `${choice.portfolioName}, edition ${choice.number}`,
            detail: `${choice.asAt ? `as at ${day(choice.asAt)}, ` : ''}${counted(choice.toScore, 'site')} to score, ${count(choice.held)} held`,
            aside: choice.isCurrent ? <Chip tone="done">current</Chip> : undefined,
          }))}
          chosen={setup.editionId ? [setup.editionId] : []}
          empty={
            <>
              <p className="mb-3">No edition is sealed yet. Upload a schedule, mend what is held and seal it.</p>
              <ButtonLink to={paths.portfolios()}>To Portfolios</ButtonLink>
            </>
          }
          onChoose={([editionId]) => change({ editionId: editionId ?? null })}
          onClose={() => setChoosing(null)}
        />
      )}
      {choosing === 'scenarios' && (
        <ChoiceDialog
          title="Which tracks?"
          most={MOST_TRACKS}
          choices={scenarioPage.items.map((scenario) => ({
            id: scenario.versionId,
            title: scenario.name,
            detail: `version ${scenario.version}, strongest wind ${gust(scenario.maxWindMs)} ${label}, ${counted(scenario.fixes, 'fix', 'fixes')}`,
            aside: (
              <TrackThumbnail paths={[scenario.path]} label={`Track of ${scenario.name}`} width={72} height={44} />
            ),
          }))}
          chosen={setup.scenarioVersionIds}
          empty={
            <>
              <p className="mb-3">No scenario yet. Bring in a best track or type one.</p>
              <ButtonLink to={paths.newScenario()}>New scenario</ButtonLink>
            </>
          }
          onChoose={(scenarioVersionIds) => change({ scenarioVersionIds })}
          onClose={() => setChoosing(null)}
        />
      )}
      {choosing === 'calibration' && (
        <ChoiceDialog
          title="Which calibration?"
          choices={calibrations.items.map((choice) => ({
            id: choice.id,
            title: `${choice.code}, version ${choice.version}`,
            detail: choice.note,
            aside: <Chip tone={choice.state === 'signed' ? 'done' : 'caution'}>{choice.state}</Chip>,
          }))}
          chosen={setup.calibrationId ? [setup.calibrationId] : []}
          empty="No calibration yet. A modeler makes one."
          onChoose={([calibrationId]) => change({ calibrationId: calibrationId ?? null })}
          onClose={() => setChoosing(null)}
        />
      )}
      {choosing === 'curves' && (
        <ChoiceDialog
          title="Which curves?"
          choices={curveSets.items.map((choice) => ({
            id: choice.id,
            title: `${choice.name}, version ${choice.version}`,
            detail: choice.note,
            aside: <Chip tone={choice.state === 'approved' ? 'done' : 'caution'}>{choice.state}</Chip>,
          }))}
          chosen={setup.curveSetId ? [setup.curveSetId] : []}
          empty="No curve set yet. A modeler makes one."
          onChoose={([curveSetId]) => change({ curveSetId: curveSetId ?? null })}
          onClose={() => setChoosing(null)}
        />
      )}
    </Page>
  );
}
