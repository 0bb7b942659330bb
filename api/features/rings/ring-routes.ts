import { Router, type RequestHandler } from 'express';
import { ring, stabilityMap } from '#contract/rings.ts';
import { handle } from '../../http/handle.ts';
import type { RingService } from './ring-service.ts';

/** POST a ring, get what it does. */
export const ringRoutes = (rings: RingService, limit: RequestHandler): Router => {
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
  return router;
};
