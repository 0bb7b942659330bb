import { Router } from 'express';
import { listCurveSets } from '#contract/models.ts';
import { handle } from '../../http/handle.ts';
import type { CurveService } from './curve-service.ts';

/** GET the damage curve sets. */
export const curveRoutes = (curves: CurveService): Router => {
  const router = Router();
  router.get(
    listCurveSets.path,
    handle(listCurveSets, ({ actor }) => curves.list(actor)),
  );
  return router;
};
