import { Router, type RequestHandler } from 'express';
import { getDrivers, getSiteDrivers } from '#contract/drivers.ts';
import { spread, windField } from '#contract/studies.ts';
import { handle } from '../../http/handle.ts';
import { whileListening } from '../../http/while-listening.ts';
import type { DriverService } from './driver-service.ts';
import type { SpreadService } from './spread-service.ts';
import type { WindFieldService } from './wind-field-service.ts';

interface Services {
  drivers: DriverService;
  spreads: SpreadService;
  windFields: WindFieldService;
}

/** What the settings do to a track: computed at once, stored nowhere. */
export const studyRoutes = ({ spreads, windFields, drivers }: Services, limit: RequestHandler): Router => {
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
  router.get(
    getDrivers.path,
    limit,
    handle(getDrivers, ({ actor, params, res }) => drivers.ofEvent(actor, params, whileListening(res))),
  );
  router.get(
    getSiteDrivers.path,
    limit,
    handle(getSiteDrivers, ({ actor, params, res }) =>
      drivers.ofSite(actor, params, params.siteNo, whileListening(res)),
    ),
  );
  return router;
};
