import { FileCheck2, Loader } from 'lucide-react';
import type { Purpose, RunState } from '#contract/runs.ts';
import { Chip, type Tone } from '../../../ui/chip.tsx';

const STATES: Record<RunState, { tone: Tone; word: string }> = {
  waiting: { tone: 'idle', word: 'Waiting' },
  working: { tone: 'info', word: 'Working' },
  complete: { tone: 'done', word: 'Complete' },
  failed: { tone: 'error', word: 'Failed, ours' },
  cancelled: { tone: 'idle', word: 'Cancelled' },
};
const PURPOSES: Record<Purpose, string> = {
  exploratory: 'Exploratory',
  underwriting_file: 'For underwriting file',
  event: 'Event',
  placement: 'Placement',
};

export function RunStateChip({ state }: { state: RunState }) {
  const { tone, word } = STATES[state];
  return (
    <Chip tone={tone} icon={state === 'working' ? Loader : undefined}>
      {word}
    </Chip>
  );
}

export function PurposeChip({ purpose }: { purpose: Purpose }) {
  return (
    <Chip tone="info" icon={FileCheck2}>
      {PURPOSES[purpose]}
    </Chip>
  );
}
