import { Router, type RequestHandler, type Response } from 'express';
import { spread, windField } from '#contract/studies.ts';
import { handle } from '../../http/handle.ts';
import type { SpreadService } from './spread-service.ts';
import type { WindFieldService } from './wind-field-service.ts';

interface Services {
  spreads: SpreadService;
  windFields: WindFieldService;
}

/** Raised when whoever asked hangs up before the answer is out. */
const whileListening = (res: Response): AbortSignal => {
  const leaving = new AbortController();
  res.once('close', () => {
    if (!res.writableFinished) leaving.abort(new Error('Nobody waits for the answer any more'));
  });
  return leaving.signal;
};

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
