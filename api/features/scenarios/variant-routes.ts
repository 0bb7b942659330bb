import { Router, type RequestHandler } from 'express';
import { previewVariants, saveVariants } from '#contract/variants.ts';
import { handle } from '../../http/handle.ts';
import type { VariantService } from './variant-service.ts';

/** Changed copies of a track, looked at or saved. */
export const variantRoutes = (variants: VariantService, limit: RequestHandler): Router => {
  const router = Router();
  router.post(
    previewVariants.path,
    limit,
    handle(previewVariants, ({ actor, params, body }) => variants.preview(actor, params.scenarioId, body)),
  );
  router.post(
    saveVariants.path,
    limit,
    handle(saveVariants, ({ actor, params, body }) => variants.save(actor, params.scenarioId, body)),
  );
  return router;
};
