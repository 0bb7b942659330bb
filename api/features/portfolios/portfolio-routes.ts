import { Router } from 'express';
import {
  applyFix,
  createPortfolio,
  getEdition,
  getPortfolio,
  getSitePoints,
  listMessages,
  listPortfolios,
  listRows,
  mapColumns,
  sealEdition,
  undoFix,
  uploadFile,
} from '#contract/portfolios.ts';
import { handle } from '../../http/handle.ts';
import type { EditionService } from './edition-service.ts';
import type { FixService } from './fix-service.ts';
import type { PortfolioService } from './portfolio-service.ts';
import type { SealService } from './seal-service.ts';
import { receiveFile } from './upload-form.ts';
import type { UploadService } from './upload-service.ts';

export interface PortfolioServices {
  portfolios: PortfolioService;
  uploads: UploadService;
  editions: EditionService;
  fixes: FixService;
  seals: SealService;
}

/** Portfolios and the way of a schedule from file to sealed edition. */
export const portfolioRoutes = ({ portfolios, uploads, editions, fixes, seals }: PortfolioServices): Router => {
  const router = Router();

  router.get(
    listPortfolios.path,
    handle(listPortfolios, ({ actor, query }) => portfolios.list(actor, query)),
  );
  router.post(
    createPortfolio.path,
    handle(createPortfolio, ({ actor, body }) => portfolios.create(actor, body)),
  );
  router.get(
    getPortfolio.path,
    handle(getPortfolio, ({ actor, params }) => portfolios.get(actor, params.portfolioId)),
  );
  router.post(
    uploadFile.path,
    handle(uploadFile, async ({ actor, params, req, res }) => {
      await portfolios.get(actor, params.portfolioId);
      uploads.refuseBySize(req.headers['content-length'] === undefined ? null : Number(req.headers['content-length']));
      return receiveFile(req, res, (upload) => uploads.upload(actor, params.portfolioId, upload));
    }),
  );
  router.get(
    getEdition.path,
    handle(getEdition, ({ actor, params }) => editions.get(actor, params.editionId)),
  );
  router.put(
    mapColumns.path,
    handle(mapColumns, ({ actor, params, body }) => editions.map(actor, params.editionId, body)),
  );
  router.get(
    listMessages.path,
    handle(listMessages, ({ actor, params }) => editions.messages(actor, params.editionId)),
  );
  router.get(
    listRows.path,
    handle(listRows, ({ actor, params, query }) => editions.rows(actor, params.editionId, query)),
  );
  router.get(
    getSitePoints.path,
    handle(getSitePoints, ({ actor, params }) => editions.points(actor, params.editionId)),
  );
  router.post(
    applyFix.path,
    handle(applyFix, ({ actor, params, body }) => fixes.apply(actor, params.editionId, body)),
  );
  router.delete(
    undoFix.path,
    handle(undoFix, ({ actor, params }) => fixes.undo(actor, params.editionId)),
  );
  router.post(
    sealEdition.path,
    handle(sealEdition, ({ actor, params, body }) => seals.seal(actor, params.editionId, body)),
  );

  return router;
};
