import { readFileSync } from 'node:fs';
import { EvaluationRequest } from '#contract/evaluations.ts';
import { engineVersion } from '../compute/engine-version.ts';
import { landIndex } from '../compute/land.ts';
import { EvaluationService } from '../features/evaluations/evaluation-service.ts';
import { answer } from './answer.ts';

// One evaluation from standard input to standard output; the same body as POST /api/v1/evaluations.
const service = new EvaluationService(landIndex, engineVersion);
process.exitCode = answer(readFileSync(0, 'utf8'), EvaluationRequest, (request) => service.evaluate(request));
