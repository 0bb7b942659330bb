import type { z } from 'zod';
import { CircleCheck, Columns3, Loader, Stamp, Hand, type LucideIcon } from 'lucide-react';
import type { EditionSummary } from '#contract/portfolios.ts';
import { counted } from '../../lib/numbers.ts';
import type { Tone } from '../../ui/chip.tsx';

type Summary = z.infer<typeof EditionSummary>;

/** A draft's or edition's state in a word with its look. */
export const stateChip = (summary: Summary): { tone: Tone; icon: LucideIcon; text: string } => {
  const held = summary.reconciliation?.held.rows ?? 0;
  switch (summary.state) {
    case 'mapping':
      return { tone: 'info', icon: Columns3, text: 'Columns to confirm' };
    case 'checking':
      return { tone: 'info', icon: Loader, text: 'Checking' };
    case 'checked':
      return held > 0
        ? { tone: 'caution', icon: Hand, text: `${counted(held, 'row')} held` }
        : { tone: 'info', icon: Stamp, text: 'Ready to seal' };
    case 'sealed':
      return { tone: 'done', icon: CircleCheck, text: 'Sealed' };
  }
};
