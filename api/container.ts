import { fileURLToPath } from 'node:url';
import type { Router } from 'express';
import type { Knex } from 'knex';
import pino, { type Logger } from 'pino';
import { PostgresBlobs } from './adapters/blobs/postgres-blobs.ts';
import { listLetters } from './adapters/mail/sink/letters.ts';
import { SmtpMail } from './adapters/mail/smtp-mail.ts';
import { StripePayments } from './adapters/payments/stripe.ts';
import type { AppParts } from './app.ts';
import { engineVersion } from './compute/engine-version.ts';
import { landDigest } from './compute/land-digest.ts';
import { landIndex } from './compute/land.ts';
import { ThreadPool, type EnginePool } from './compute/pool.ts';
import type { Config } from './config.ts';
import { createDatabase } from './db/database.ts';
import { Listener } from './db/listener.ts';
import { AuditLog } from './features/audit/audit-log.ts';
import { BillingService } from './features/billing/billing-service.ts';
import { billingRoutes } from './features/billing/billing-routes.ts';
import { ChargesReader } from './features/billing/charges-reader.ts';
import { LedgerService } from './features/billing/ledger-service.ts';
import { LedgerStore } from './features/billing/ledger-store.ts';
import { PaymentSettlement } from './features/billing/payment-settlement.ts';
import { PaymentStore } from './features/billing/payment-store.ts';
import { TariffStore } from './features/billing/tariff-store.ts';
import { paymentWebhookRoutes } from './features/billing/webhook-routes.ts';
import { calibrationRoutes } from './features/calibrations/calibration-routes.ts';
import { CalibrationService } from './features/calibrations/calibration-service.ts';
import { CalibrationStore } from './features/calibrations/calibration-store.ts';
import { ModelsReader } from './features/calibrations/models-reader.ts';
import { curveRoutes } from './features/curves/curve-routes.ts';
import { CurveService } from './features/curves/curve-service.ts';
import { CurveStore } from './features/curves/curve-store.ts';
import { CheckJob } from './features/portfolios/check-job.ts';
import { EditionService } from './features/portfolios/edition-service.ts';
import { EditionStore } from './features/portfolios/edition-store.ts';
import { FixService } from './features/portfolios/fix-service.ts';
import { IntakeStore } from './features/portfolios/intake-store.ts';
import { LargestSitesReader } from './features/portfolios/largest-sites-reader.ts';
import { offshoreFrom } from './features/portfolios/offshore.ts';
import { PortfolioReader } from './features/portfolios/portfolio-reader.ts';
import { portfolioRoutes } from './features/portfolios/portfolio-routes.ts';
import { PortfolioService } from './features/portfolios/portfolio-service.ts';
import { PortfolioStore } from './features/portfolios/portfolio-store.ts';
import { SealService } from './features/portfolios/seal-service.ts';
import { SiteStore } from './features/portfolios/site-store.ts';
import { UploadService } from './features/portfolios/upload-service.ts';
import { evaluationRoutes } from './features/evaluations/evaluation-routes.ts';
import { EvaluationService } from './features/evaluations/evaluation-service.ts';
import { DriverService } from './features/studies/driver-service.ts';
import { SpreadService } from './features/studies/spread-service.ts';
import { StudyGate } from './features/studies/study-gate.ts';
import { studyRoutes } from './features/studies/study-routes.ts';
import { WindFieldService } from './features/studies/wind-field-service.ts';
import { BreakdownService } from './features/rings/breakdown-service.ts';
import { ringRoutes } from './features/rings/ring-routes.ts';
import { RingService } from './features/rings/ring-service.ts';
import { DrawService } from './features/results/draw-service.ts';
import { DrawStore } from './features/results/draw-store.ts';
import { LossSitesReader } from './features/results/loss-sites-reader.ts';
import { resultRoutes } from './features/results/result-routes.ts';
import { ResultService } from './features/results/result-service.ts';
import { ResultStore } from './features/results/result-store.ts';
import { QuoteService } from './features/runs/quote-service.ts';
import { QuoteStore } from './features/runs/quote-store.ts';
import { RunClosing } from './features/runs/run-closing.ts';
import { RunReader } from './features/runs/run-reader.ts';
import { runRoutes } from './features/runs/run-routes.ts';
import { RunService } from './features/runs/run-service.ts';
import { RunStore } from './features/runs/run-store.ts';
import { SiteFetchStore } from './features/runs/site-fetch-store.ts';
import { ScoreJob } from './features/runs/score-job.ts';
import { ScenarioReader } from './features/scenarios/scenario-reader.ts';
import { scenarioRoutes } from './features/scenarios/scenario-routes.ts';
import { ScenarioService } from './features/scenarios/scenario-service.ts';
import { ScenarioStore } from './features/scenarios/scenario-store.ts';
import { variantRoutes } from './features/scenarios/variant-routes.ts';
import { VariantService } from './features/scenarios/variant-service.ts';
import { AccessClaims, TOKEN_ALGORITHM, TOKEN_ISSUER } from './features/session/access-token.ts';
import { sessionRoutes } from './features/session/session-routes.ts';
import { SessionService } from './features/session/session-service.ts';
import { SessionStore } from './features/session/session-store.ts';
import { validationRoutes } from './features/validation/validation-routes.ts';
import { ValidationService } from './features/validation/validation-service.ts';
import { signInCheck } from './http/auth.ts';
import { SessionCookies } from './http/cookies.ts';
import { csrfCheck } from './http/csrf.ts';
import { createOnce } from './http/idempotency.ts';
import { DEFAULT_LIMITS, limitCompute, limitDraws, limitSignIn, type Limits } from './http/limits.ts';
import { mailPage } from './http/pages.ts';
import { Outbox } from './jobs/outbox.ts';
import { Queue } from './jobs/queue.ts';
import type { Blobs } from './ports/blobs.ts';
import { systemClock, type Clock } from './ports/clock.ts';
import { randomIds, type Ids } from './ports/ids.ts';
import type { Mail } from './ports/mail.ts';
import type { Payments } from './ports/payments.ts';
import { createTransact, type Transact } from './transact.ts';

/** What tests put in the place of the real thing. */
export interface Overrides {
  clock?: Clock;
  ids?: Ids;
  mail?: Mail;
  blobs?: Blobs;
  payments?: Payments;
  limits?: Limits;
  log?: Logger;
  pool?: EnginePool;
}

export interface Container {
  config: Config;
  log: Logger;
  database: Knex;
  transact: Transact;
  queue: Queue;
  clock: Clock;
  ids: Ids;
  mail: Mail;
  blobs: Blobs;
  audit: AuditLog;
  outbox: Outbox;
  checkJob: CheckJob;
  scoreJob: ScoreJob;
  services: { quotes: QuoteService; runs: RunService; results: ResultService };
  appParts: AppParts;
  close(): Promise<void>;
}

const SECRET_PATHS = [
  'password',
  '*.password',
  'token',
  '*.token',
  '*.refreshToken',
  '*.accessToken',
  'headers',
  '*.headers',
];

/** Without the driver's connection objects that errors of the database drag along. */
const errorInBrief = (error: Error & { code?: unknown }) => ({
  type: error.name,
  message: error.message,
  code: error.code,
  stack: error.stack,
});

const createLog = (level: string): Logger =>
  pino({
    level,
    base: { service: 'gustloom' },
    serializers: { err: errorInBrief },
    redact: { paths: SECRET_PATHS, censor: '[kept back]' },
  });

/** Threads the engine runs on, kept warm: in a worker for runs, in an API process one to explain a site at once. */
const THREADS = 2;
const enginePool = (role: 'api' | 'worker', threads: number): EnginePool => {
  const kept = role === 'worker' ? threads : 1;
  return new ThreadPool({ threads: kept, kept });
};

const fail = (error: Error): void => {
  throw error;
};

/** The composition root: builds everything once, hands each part what it needs. `role` says which process it is for. */
export const createContainer = (
  config: Config,
  role: 'api' | 'worker',
  overrides: Overrides = {},
  onLocksLost = fail,
): Container => {
  const log = overrides.log ?? createLog(config.logLevel);
  const clock = overrides.clock ?? systemClock;
  const ids = overrides.ids ?? randomIds;
  const mail = overrides.mail ?? new SmtpMail(config.mail.smtpUrl, config.mail.from);
  const limits = overrides.limits ?? DEFAULT_LIMITS;
  const isProduction = config.environment === 'production';

  const database = createDatabase(config.databaseUrl);
  const transact = createTransact(database);
  const queue = new Queue({ databaseUrl: config.databaseUrl, log, supervise: role === 'worker', onLocksLost });
  const blobs = overrides.blobs ?? new PostgresBlobs(transact);
  const audit = new AuditLog(clock, ids);
  const outbox = new Outbox(queue, clock, ids);

  const cookies = new SessionCookies(isProduction);
  const sessions = new SessionService(transact, new SessionStore(database), audit, clock, ids, config);

  // Portfolios
  const portfolioParts = {
    ...{ transact, blobs, audit, clock, ids },
    ...{ portfolios: new PortfolioStore(), editions: new EditionStore(), intake: new IntakeStore() },
    ...{ sites: new SiteStore(), jobs: queue, offshoreM: offshoreFrom(landIndex) },
  };
  const portfolioServices = {
    portfolios: new PortfolioService(portfolioParts),
    uploads: new UploadService(portfolioParts),
    editions: new EditionService(portfolioParts),
    fixes: new FixService(portfolioParts),
    seals: new SealService(portfolioParts),
  };
  const checkJob = new CheckJob(portfolioParts);

  // Scenarios, curves, calibrations
  const scenarios = new ScenarioService(transact, new ScenarioStore(), landIndex, {
    ...{ clock, ids, audit, staleAfterHours: config.staleAfterHours },
  });
  const variants = new VariantService(transact, new ScenarioStore(), scenarios, landIndex);
  const curves = new CurveService(transact, new CurveStore());
  const calibrations = new CalibrationService(transact, new CalibrationStore(), { clock, ids, audit });

  // Billing; the ledger is what runs reserve and settle with
  const payments = overrides.payments ?? new StripePayments(config.stripe);
  const billingStores = { ledger: new LedgerStore(), payments: new PaymentStore(), charges: new ChargesReader() };
  const ledger = new LedgerService(billingStores.ledger, new TariffStore(), clock, ids);
  const settlement = new PaymentSettlement(transact, billingStores.payments, ledger, payments, clock, audit);
  const billing = new BillingService(transact, ledger, billingStores, payments, settlement, {
    ...{ clock, ids },
    publicUrl: config.publicUrl,
  });

  // Runs and results
  const pool = overrides.pool ?? enginePool(role, config.computeThreads ?? THREADS);
  const listener = new Listener(config.databaseUrl, log);
  const results = new ResultStore();
  const runBase = {
    ...{ transact, audit, clock, ids, outbox, engineVersion, pool, results, billing: ledger },
    ...{ runs: new RunStore(), quotes: new QuoteStore(), editions: new PortfolioReader() },
    ...{ tracks: new ScenarioReader(), models: new ModelsReader(new CalibrationStore()) },
    ...{ jobs: queue, announcements: listener, publicUrl: config.publicUrl },
    staleAfterHours: config.staleAfterHours,
    fetches: new SiteFetchStore(landDigest),
  };
  const runParts = { ...runBase, closing: new RunClosing(runBase) };
  const runServices = { quotes: new QuoteService(runParts), runs: new RunService(runParts) };
  const scoreJob = new ScoreJob(runParts);
  const resultBase = { ...runBase, tracks: new RunReader(runBase), draws: new DrawStore() };
  const resultService = new ResultService(resultBase);
  const drawService = new DrawService({ ...resultBase, gate: new StudyGate(2, 20, 3) });

  // Studies
  const curveStore = new CurveStore();
  const calibrationStore = new CalibrationStore();
  const studyParts = {
    ...{ transact, pool, engineVersion, land: landIndex, tracks: runBase.tracks },
    models: {
      calibrations: calibrationStore.list.bind(calibrationStore),
      curveSets: curveStore.list.bind(curveStore),
    },
    editions: new LargestSitesReader({ ...portfolioParts, portfolios: runBase.editions }),
  };
  const studies = {
    spreads: new SpreadService(studyParts),
    windFields: new WindFieldService(studyParts),
    drivers: new DriverService({
      ...{ transact, pool, engineVersion },
      ...{ runs: resultBase.tracks, sites: new LossSitesReader(), gate: new StudyGate(1, 6, 10) },
    }),
  };

  const rings = {
    rings: new RingService(engineVersion),
    breakdowns: new BreakdownService({ pool, engineVersion, gate: new StudyGate(1, 4, 10) }),
  };

  const routers: Router[] = [
    sessionRoutes(sessions, cookies, limitSignIn(limits)),
    portfolioRoutes(portfolioServices),
    scenarioRoutes(scenarios),
    variantRoutes(variants, limitCompute(limits)),
    curveRoutes(curves),
    calibrationRoutes(calibrations),
    billingRoutes(billing),
    runRoutes(runServices),
    resultRoutes(resultService, drawService, limitDraws(limits)),
    studyRoutes(studies, limitCompute(limits)),
    ringRoutes(rings, limitCompute(limits)),
    evaluationRoutes(new EvaluationService(landIndex, engineVersion), limitCompute(limits)),
    validationRoutes(new ValidationService()),
  ];
  const rawRouters: Router[] = [paymentWebhookRoutes(settlement)];
  const { sinkFolder } = config.mail;
  const devRouters: Router[] = !isProduction && sinkFolder ? [mailPage(() => listLetters(sinkFolder))] : [];

  return {
    ...{ config, log, database, transact, queue, clock, ids, mail, blobs, audit, outbox, checkJob, scoreJob },
    services: { ...runServices, results: resultService },
    appParts: {
      ...{ log, limits, isProduction, routers, rawRouters, devRouters },
      publicUrl: config.publicUrl,
      trustedProxies: config.trustedProxies,
      signInCheck: signInCheck(
        { secret: config.tokenSecret, issuer: TOKEN_ISSUER, algorithm: TOKEN_ALGORITHM },
        async (claims) => {
          const known = AccessClaims.safeParse(claims);
          return known.success ? sessions.identify(known.data) : null;
        },
      ),
      csrfCheck: csrfCheck((sessionId) => sessions.csrfTokenFor(sessionId)),
      once: createOnce(transact, clock),
      isHealthy: () =>
        database.raw('select 1').then(
          () => true,
          () => false,
        ),
      webFolder: fileURLToPath(new URL('../dist/web', import.meta.url)),
    },
    close: async () => {
      await queue.stop();
      await listener.close();
      await pool.close();
      await database.destroy();
    },
  };
};
