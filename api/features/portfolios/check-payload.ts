import { z } from 'zod';

export const CHECK_QUEUE = 'portfolios.check';

/** What the queue carries: which edition to check, and for which mapping of it. */
export const CheckPayload = z.object({ orgId: z.uuid(), editionId: z.uuid(), checkNo: z.int() });
export type CheckPayload = z.infer<typeof CheckPayload>;
