import { Router, type RequestHandler } from 'express';
import { getDrawSites, listDraws } from '#contract/draws.ts';
import { exportSites, getFootprint, getResultPoints, getSiteDetail, listSites, StoredView } from '#contract/runs.ts';
import { handle, handleStream } from '../../http/handle.ts';
import { whileListening } from '../../http/while-listening.ts';
import type { DrawService } from './draw-service.ts';
import type { ResultService } from './result-service.ts';
import { writeSites } from './site-export.ts';

/** Results of finished tracks: table, map, one site, file. */
export const resultRoutes = (results: ResultService, draws: DrawService, limit: RequestHandler): Router => {
  const router = Router();
  // What is stored costs nothing to read again.
  const limitComputed: RequestHandler = (req, res, next) =>
    StoredView.safeParse(req.query.view ?? 'p50').success ? next() : limit(req, res, next);
  router.get(
    listSites.path,
    handle(listSites, ({ actor, params, query }) => results.sites(actor, params, query)),
  );
  router.get(
    exportSites.path,
    handleStream(exportSites, ({ actor, params, res }) =>
      results.export(actor, params, (track, sites) => {
        res.status(200).set({
          'Content-Type': 'text/csv; charset=utf-8; header=present',
          'Content-Disposition': `attachment; filename="${track.runNumber}-sites.csv"`,
        });
        return writeSites(track, sites, res);
      }),
    ),
  );
  router.get(
    getSiteDetail.path,
    handle(getSiteDetail, ({ actor, params }) => results.detail(actor, params, params.siteNo)),
  );
  router.get(
    getResultPoints.path,
    handle(getResultPoints, ({ actor, params }) => results.points(actor, params)),
  );
  router.get(
    getFootprint.path,
    limitComputed,
    handle(getFootprint, ({ actor, params, query, res }) => {
      const stored = StoredView.safeParse(query.view);
      return stored.success
        ? results.footprint(actor, params, stored.data)
        : draws.footprint(actor, params, query, whileListening(res));
    }),
  );
  router.get(
    listDraws.path,
    handle(listDraws, ({ actor, params }) => draws.list(actor, params)),
  );
  router.get(
    getDrawSites.path,
    limit,
    handle(getDrawSites, ({ actor, params, res }) => draws.sites(actor, params, params.draw, whileListening(res))),
  );
  return router;
};
