import { Router } from 'express';
import { listCalibrations } from '#contract/models.ts';
import { handle } from '../../http/handle.ts';
import type { CalibrationService } from './calibration-service.ts';

/** GET the calibrations. */
export const calibrationRoutes = (calibrations: CalibrationService): Router => {
  const router = Router();
  router.get(
    listCalibrations.path,
    handle(listCalibrations, ({ actor }) => calibrations.list(actor)),
  );
  return router;
};
