import { Router } from 'express';
import { exportSites, getFootprint, getResultPoints, getSiteDetail, listSites } from '#contract/runs.ts';
import { handle, handleStream } from '../../http/handle.ts';
import type { ResultService } from './result-service.ts';
import { writeSites } from './site-export.ts';

/** Results of finished tracks: table, map, one site, file. */
export const resultRoutes = (results: ResultService): Router => {
  const router = Router();
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
    handle(getFootprint, ({ actor, params, query }) => results.footprint(actor, params, query.view)),
  );
  return router;
};
