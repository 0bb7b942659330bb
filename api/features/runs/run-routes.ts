import { Router } from 'express';
import {
  acceptQuote,
  cancelRun,
  createQuote,
  getQuote,
  getRun,
  getRunSlip,
  listRuns,
  watchRun,
} from '#contract/runs.ts';
import { openEvents } from '../../http/events.ts';
import { handle, handleStream } from '../../http/handle.ts';
import type { QuoteService } from './quote-service.ts';
import type { RunService } from './run-service.ts';

/** Quotes, and the runs that come of them. */
export const runRoutes = ({ quotes, runs }: { quotes: QuoteService; runs: RunService }): Router => {
  const router = Router();
  router.post(
    createQuote.path,
    handle(createQuote, ({ actor, body }) => quotes.create(actor, body)),
  );
  router.get(
    getQuote.path,
    handle(getQuote, ({ actor, params }) => quotes.get(actor, params.quoteId)),
  );
  router.post(
    acceptQuote.path,
    handle(acceptQuote, ({ actor, params, req }) =>
      runs.accept(actor, params.quoteId, req.get('Idempotency-Key') ?? ''),
    ),
  );
  router.get(
    listRuns.path,
    handle(listRuns, ({ actor, query }) => runs.list(actor, query)),
  );
  router.get(
    getRun.path,
    handle(getRun, ({ actor, params }) => runs.get(actor, params.runId)),
  );
  router.get(
    watchRun.path,
    handleStream(watchRun, async ({ actor, params, res }) => {
      await runs.requireRun(actor, params.runId);
      const events = openEvents(res);
      try {
        await runs.watch(actor, params.runId, events.send, events.signal);
      } finally {
        events.close();
      }
    }),
  );
  router.post(
    cancelRun.path,
    handle(cancelRun, ({ actor, params }) => runs.cancel(actor, params.runId)),
  );
  router.get(
    getRunSlip.path,
    handle(getRunSlip, ({ actor, params }) => runs.slip(actor, params.runId)),
  );
  return router;
};
