import * as billing from './billing.ts';
import * as draws from './draws.ts';
import * as drivers from './drivers.ts';
import type { Endpoint } from './endpoint.ts';
import * as evaluations from './evaluations.ts';
import * as models from './models.ts';
import * as portfolios from './portfolios.ts';
import * as rings from './rings.ts';
import * as runs from './runs.ts';
import * as scenarios from './scenarios.ts';
import * as session from './session.ts';
import * as studies from './studies.ts';
import * as variants from './variants.ts';
import * as validation from './validation.ts';

const isEndpoint = (value: unknown): value is Endpoint =>
  typeof value === 'object' &&
  value !== null &&
  'id' in value &&
  'method' in value &&
  'path' in value &&
  'access' in value;

/** Every operation of the API; a new contract file is added to this list. */
export const ALL_ENDPOINTS: readonly Endpoint[] = [
  session,
  portfolios,
  scenarios,
  models,
  runs,
  draws,
  drivers,
  evaluations,
  studies,
  variants,
  validation,
  rings,
  billing,
].flatMap((file) => Object.values<unknown>(file).filter(isEndpoint));
