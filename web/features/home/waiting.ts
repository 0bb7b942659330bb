import { Columns3, Hand, OctagonAlert, Play, Stamp, TrendingUp, type LucideIcon } from 'lucide-react';
import type { Portfolio } from '#contract/portfolios.ts';
import type { RunSummary } from '#contract/runs.ts';
import { clockOrDay } from '../../lib/dates.ts';
import { moneyRange, shortMoney } from '../../lib/money.ts';
import { counted } from '../../lib/numbers.ts';
import { paths } from '../../paths.ts';

export interface WaitingItem {
  key: string;
  icon: LucideIcon;
  tone: 'info' | 'caution' | 'error';
  title: string;
  text: string;
  when: string;
  action: { label: string; to: string };
  /** Later moments stand higher among items of the same weight. */
  at: number;
  weight: number;
}

const RECENT_MS = 3 * 86_400_000;
/** With fewer runs than a page holds, the list is complete. */
const ALL_RUNS_BELOW = 20;

const draftItem = (portfolio: Portfolio, now: Date): WaitingItem | null => {
  const { draft } = portfolio;
  if (!draft) return null;
  const base = { key: draft.id, when: `Since ${clockOrDay(draft.updatedAt, now)}`, at: Date.parse(draft.updatedAt) };
  if (draft.state === 'mapping')
    return {
      ...base,
      icon: Columns3,
      tone: 'info',
      weight: 1,
      title: `${portfolio.name}: say which column is which`,
      text: 'The file is uploaded. Nothing is loaded until its columns are confirmed.',
      action: { label: 'Match columns', to: paths.edition(draft.id, 'columns') },
    };
  if (draft.state !== 'checked' || !draft.reconciliation) return null;
  const { held } = draft.reconciliation;
  if (held.rows > 0)
    return {
      ...base,
      icon: Hand,
      tone: 'caution',
      weight: 0,
      title: `${portfolio.name} has ${counted(held.rows, 'row')} held`,
      text: `${shortMoney(held.tivMinor, portfolio.currency)} isn’t scored until ${held.rows === 1 ? 'it is' : 'they are'} fixed.`,
      action: { label: 'Fix rows', to: paths.edition(draft.id, 'checks') },
    };
  return {
    ...base,
    icon: Stamp,
    tone: 'info',
    weight: 1,
    title: `${portfolio.name} is ready to seal`,
    text: `Every row of edition ${draft.number} can be scored. A run needs it sealed.`,
    action: { label: 'See readiness', to: paths.edition(draft.id, 'readiness') },
  };
};

/** A sealed edition that nobody has run: the next step, once all runs are known. */
const unrunItem = (portfolio: Portfolio, runs: readonly RunSummary[], now: Date): WaitingItem | null => {
  const { current, draft } = portfolio;
  if (!current || draft || runs.length >= ALL_RUNS_BELOW || runs.some(({ editionId }) => editionId === current.id))
    return null;
  return {
    key: current.id,
    icon: Play,
    tone: 'info',
    weight: 3,
    at: Date.parse(current.updatedAt),
    when: `Sealed ${clockOrDay(current.updatedAt, now)}`,
    title: `${portfolio.name}, edition ${current.number}, hasn’t been run`,
    text: 'Choose a track and see the price first; a quote is free.',
    action: { label: 'Quote a run', to: paths.newRun({ edition: current.id }) },
  };
};

const runItem = (run: RunSummary, now: Date): WaitingItem | null => {
  const ended = run.finishedAt && Date.parse(run.finishedAt);
  if (!ended || now.getTime() - ended > RECENT_MS) return null;
  const base = { key: run.id, when: `Ended ${clockOrDay(run.finishedAt!, now)}`, at: ended };
  if (run.state === 'failed')
    return {
      ...base,
      icon: OctagonAlert,
      tone: 'error',
      weight: 0,
      title: `${run.number} for ${run.portfolioName} stopped`,
      text: `${run.scenariosDone} of ${counted(run.scenariosTotal, 'track')} finished; what failed isn’t charged.`,
      action: { label: 'See why', to: paths.run(run.id) },
    };
  if (run.state !== 'complete') return null;
  return {
    ...base,
    icon: TrendingUp,
    tone: 'info',
    weight: 2,
    title: `${run.number} for ${run.portfolioName} is complete`,
    text: run.gross
      ? `Gross ${moneyRange(run.gross.p5, run.gross.p95, run.currency)}, 5–95 %${run.scenariosTotal > 1 ? ', on the track with the largest loss' : ''}.`
      : 'No vortex range: layer off, or no site under it.',
    action: { label: 'Open result', to: paths.run(run.id) },
  };
};

/** What waits for a person: held rows and failures first, then drafts to carry on, then fresh results. */
export const waitingItems = (
  portfolios: readonly Portfolio[],
  /** Null while they are being read. */
  runs: readonly RunSummary[] | null,
  now: Date,
): WaitingItem[] =>
  [
    ...portfolios.map((portfolio) => draftItem(portfolio, now) ?? (runs && unrunItem(portfolio, runs, now))),
    ...(runs ?? []).map((run) => runItem(run, now)),
  ]
    .filter((item): item is WaitingItem => item !== null)
    .sort((a, b) => a.weight - b.weight || b.at - a.at);
