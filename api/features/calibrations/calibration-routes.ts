import { Router } from 'express';
import { draftCalibration, listCalibrations } from '#contract/models.ts';
import { handle } from '../../http/handle.ts';
import type { CalibrationService } from './calibration-service.ts';

/** GET the calibrations, POST a draft of the next version. */
export const calibrationRoutes = (calibrations: CalibrationService): Router => {
  const router = Router();
  router.get(
    listCalibrations.path,
    handle(listCalibrations, ({ actor }) => calibrations.list(actor)),
  );
  router.post(
    draftCalibration.path,
    handle(draftCalibration, ({ actor, body }) => calibrations.draft(actor, body)),
  );
  return router;
};
