import { readFileSync } from 'node:fs';
import { RingRequest } from '#contract/rings.ts';
import { engineVersion } from '../compute/engine-version.ts';
import { RingService } from '../features/rings/ring-service.ts';
import { answer } from './answer.ts';

// One ring from standard input to standard output; the same body as POST /api/v1/rings.
const service = new RingService(engineVersion);
process.exitCode = answer(readFileSync(0, 'utf8'), RingRequest, (request) => service.describe(request));
