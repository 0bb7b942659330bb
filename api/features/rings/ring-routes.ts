import { Router, type RequestHandler } from 'express';
import { breakdown, ring, stabilityMap } from '#contract/rings.ts';
import { handle } from '../../http/handle.ts';
import { whileListening } from '../../http/while-listening.ts';
import type { BreakdownService } from './breakdown-service.ts';
import type { RingService } from './ring-service.ts';

interface Services {
  rings: RingService;
  breakdowns: BreakdownService;
}

/** POST a ring, get what it does. */
export const ringRoutes = ({ rings, breakdowns }: Services, limit: RequestHandler): Router => {
  const router = Router();
  router.post(
    ring.path,
    limit,
    handle(ring, ({ body }) => rings.describe(body)),
  );
  router.get(
    stabilityMap.path,
    handle(stabilityMap, () => rings.map()),
  );
  router.post(
    breakdown.path,
    limit,
    handle(breakdown, ({ body, res }) => breakdowns.breakdown(body, whileListening(res))),
  );
  return router;
};
