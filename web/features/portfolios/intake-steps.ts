import type { Edition } from '#contract/portfolios.ts';
import { count, counted } from '../../lib/numbers.ts';
import { paths, type IntakeStep } from '../../paths.ts';
import type { Step } from '../../ui/stepper.tsx';

const isIntakeStep = (text: string | null): text is IntakeStep =>
  text === 'columns' || text === 'checks' || text === 'readiness' || text === 'sites';

/** Where a draft stands when its address doesn't say. */
const naturalStep = (edition: Edition): IntakeStep => {
  if (edition.state === 'mapping') return 'columns';
  return edition.state === 'sealed' ? 'sites' : 'checks';
};

/** Asked for a step that can't be shown yet, the draft shows where it stands. */
export const stepShown = (edition: Edition, wanted: string | null): IntakeStep => {
  if (!isIntakeStep(wanted)) return naturalStep(edition);
  if (edition.state === 'sealed') return wanted === 'readiness' ? 'readiness' : 'sites';
  if (edition.state === 'mapping') return 'columns';
  if (edition.state === 'checking') return wanted === 'columns' ? 'columns' : 'checks';
  return wanted;
};

const ORDER = ['columns', 'checks', 'readiness'] as const;
const DELIMITERS: Record<string, string> = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'pipe' };

/** The stepper of a draft: each step with its one-line outcome. */
export const intakeSteps = (edition: Edition, shown: IntakeStep): Step[] => {
  const mapped = edition.columns.filter(({ field }) => field !== null).length;
  const held = edition.reconciliation?.held.rows ?? 0;
  const checked = edition.state === 'checked';
  const position = ORDER.findIndex((step) => step === shown);
  const stateOf = (index: number, reached: boolean): Step['state'] =>
    index === position ? 'current' : reached && (index < position || checked) ? 'done' : 'later';
  const checksOutcome = () => {
    if (edition.state === 'mapping') return 'after columns';
    if (edition.state === 'checking') return 'under way';
    const rows = edition.fixes.reduce((sum, fix) => sum + fix.rows, 0);
    if (held > 0) return `${count(held)} held`;
    return rows > 0 ? `${counted(rows, 'row')} corrected` : 'none held';
  };
  return [
    {
      label: 'Upload',
      outcome: `${edition.file.name}, ${DELIMITERS[edition.style.delimiter] ?? edition.style.delimiter} separated`,
      state: 'done',
      to: paths.portfolio(edition.portfolioId),
    },
    {
      label: 'Columns',
      outcome:
        mapped > 0
          ? `${mapped} of ${edition.columns.length} mapped`
          : `${counted(edition.columns.length, 'column')} found`,
      state: stateOf(0, mapped > 0),
      to: paths.edition(edition.id, 'columns'),
    },
    {
      label: 'Checks',
      outcome: checksOutcome(),
      state: stateOf(1, checked && position > 1),
      to: edition.state === 'mapping' ? undefined : paths.edition(edition.id, 'checks'),
    },
    {
      label: 'Readiness',
      outcome: checked ? `seal edition ${edition.number}` : 'after checks',
      state: position === 2 ? 'current' : 'later',
      to: checked ? paths.edition(edition.id, 'readiness') : undefined,
    },
  ];
};
