import { ClockAlert, HardHat, Landmark, LifeBuoy, ScanLine, Waves, type LucideIcon } from 'lucide-react';
import type { NoticeCode } from '#contract/notices.ts';

export const NOTICE_ICONS: Record<NoticeCode, LucideIcon> = {
  'life-safety': LifeBuoy,
  engineering: HardHat,
  uncertainty: Waves,
  scope: ScanLine,
  regulatory: Landmark,
  provisional: ClockAlert,
};
