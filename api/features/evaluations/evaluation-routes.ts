import { Router, type RequestHandler } from 'express';
import { evaluate } from '#contract/evaluations.ts';
import { handle } from '../../http/handle.ts';
import type { EvaluationService } from './evaluation-service.ts';

/** POST a track and some sites, get gusts and losses. */
export const evaluationRoutes = (evaluations: EvaluationService, limit: RequestHandler): Router => {
  const router = Router();
  router.post(
    evaluate.path,
    limit,
    handle(evaluate, ({ body }) => evaluations.evaluate(body)),
  );
  return router;
};
