import { Router } from 'express';
import { setRing } from '#contract/rings.ts';
import {
  createScenario,
  getScenario,
  listScenarios,
  readTrack,
  resolveTrack,
  saveVersion,
} from '#contract/scenarios.ts';
import { handle } from '../../http/handle.ts';
import type { ScenarioService } from './scenario-service.ts';

/** Reading and resolving tracks without saving, and scenarios with their versions. */
export const scenarioRoutes = (scenarios: ScenarioService): Router => {
  const router = Router();
  router.post(
    readTrack.path,
    handle(readTrack, ({ body }) => scenarios.read(body)),
  );
  router.post(
    resolveTrack.path,
    handle(resolveTrack, ({ body }) => scenarios.resolve(body)),
  );
  router.get(
    listScenarios.path,
    handle(listScenarios, ({ actor, query }) => scenarios.list(actor, query)),
  );
  router.post(
    createScenario.path,
    handle(createScenario, ({ actor, body }) => scenarios.create(actor, body)),
  );
  router.get(
    getScenario.path,
    handle(getScenario, ({ actor, params }) => scenarios.get(actor, params.scenarioId)),
  );
  router.post(
    saveVersion.path,
    handle(saveVersion, ({ actor, params, body }) => scenarios.saveVersion(actor, params.scenarioId, body)),
  );
  router.post(
    setRing.path,
    handle(setRing, ({ actor, params, body }) => scenarios.setRing(actor, params.scenarioId, body)),
  );
  return router;
};
