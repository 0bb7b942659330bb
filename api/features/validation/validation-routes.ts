import { Router } from 'express';
import { getValidation } from '#contract/validation.ts';
import { handle } from '../../http/handle.ts';
import type { ValidationService } from './validation-service.ts';

/** GET the comparison with observed gusts. */
export const validationRoutes = (validation: ValidationService): Router => {
  const router = Router();
  router.get(
    getValidation.path,
    handle(getValidation, () => validation.get()),
  );
  return router;
};
