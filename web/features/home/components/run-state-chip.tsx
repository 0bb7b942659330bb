import { Ban, CircleAlert, CircleCheck, Hourglass, Loader, OctagonAlert, Stamp } from 'lucide-react';
import type { RunSummary } from '#contract/runs.ts';
import { Chip } from '../../../ui/chip.tsx';

/** State of a run in a word; a finished one on an unsigned calibration says exploratory. */
export function RunStateChip({ run }: { run: RunSummary }) {
  switch (run.state) {
    case 'waiting':
      return (
        <Chip tone="info" icon={Hourglass}>
          Waiting
        </Chip>
      );
    case 'working':
      return (
        <Chip tone="info" icon={Loader}>
          {run.scenariosDone} of {run.scenariosTotal}
        </Chip>
      );
    case 'complete':
      if (run.scenariosDone < run.scenariosTotal)
        return (
          <Chip tone="caution" icon={CircleAlert}>
            {run.scenariosDone} of {run.scenariosTotal}
          </Chip>
        );
      return run.stamped ? (
        <Chip tone="event" icon={Stamp}>
          Exploratory
        </Chip>
      ) : (
        <Chip tone="done" icon={CircleCheck}>
          Complete
        </Chip>
      );
    case 'failed':
      return (
        <Chip tone="error" icon={OctagonAlert}>
          Failed
        </Chip>
      );
    case 'cancelled':
      return (
        <Chip tone="idle" icon={Ban}>
          Cancelled
        </Chip>
      );
  }
}
