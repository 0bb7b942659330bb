import { Router, type RequestHandler } from 'express';
import { spread, windField } from '#contract/studies.ts';
import { handle } from '../../http/handle.ts';
import { whileListening } from '../../http/while-listening.ts';
import type { SpreadService } from './spread-service.ts';
import type { WindFieldService } from './wind-field-service.ts';

interface Services {
  spreads: SpreadService;
  windFields: WindFieldService;
}

/** What the settings do to a track: computed at once, stored nowhere. */
export const studyRoutes = ({ spreads, windFields }: Services, limit: RequestHandler): Router => {
  const router = Router();
  router.post(
    spread.path,
    limit,
    handle(spread, ({ actor, params, body, res }) =>
      spreads.spread(actor, params.scenarioId, body, whileListening(res)),
    ),
  );
  router.post(
    windField.path,
    limit,
    handle(windField, ({ actor, params, body, res }) =>
      windFields.at(actor, params.scenarioId, body, whileListening(res)),
    ),
  );
  return router;
};
