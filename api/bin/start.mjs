/**
 * `npm start`: everything from a fresh clone to a running product, and nothing that is already there.
 * `--reload` (npm run dev) restarts the API and the worker and rebuilds the client when their sources change.
 */
import { spawnSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync, watch, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { ensureClient, VITE } from './client-build.mjs';
import { Family } from './family.mjs';
import { ensureNodePackages } from './packages.mjs';
import { clusterStatus, DATA_FOLDER, ROOT, SetupError, startCluster, stopCluster } from './postgres.mjs';

const DATABASE = 'gustloom';
const READY_MS = 60_000;
const DATABASE_LOOK_MS = 2_000;
const reload = process.argv.includes('--reload');
const port = Number(process.env.PORT || 3000);
const address = (process.env.PUBLIC_URL || `http://localhost:${port}`).replace(/\/$/, '');
const lockFile = join(DATA_FOLDER, 'start.json');
const at = (path) => join(ROOT, path);

const canListen = (wanted, host) =>
  new Promise((answer) => {
    const probe = createServer();
    probe.once('error', () => answer(null));
    probe.listen(wanted, host, () => {
      const { port: got } = probe.address();
      probe.close(() => answer(got));
    });
  });

const readJson = (file) => {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return null;
  }
};

const isOurStart = (pid) => {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').includes('start.mjs');
  } catch {
    return false;
  }
};

/** One start for one data folder; a lock left by a killed start counts for nothing. */
const takeLock = async () => {
  mkdirSync(DATA_FOLDER, { recursive: true });
  const other = readJson(lockFile);
  if (other && other.pid !== process.pid && isOurStart(other.pid))
    throw new SetupError(`Already running at ${other.address} (process ${other.pid}).`);
  // Children of a killed start need a moment to notice that it is gone.
  for (let tries = other ? 20 : 1; (await canListen(port)) === null; tries -= 1) {
    if (tries <= 1)
      throw new SetupError(`Port ${port} is taken by another program. Choose another one: PORT=${port + 1} npm start`);
    await sleep(500);
  }
  writeFileSync(lockFile, JSON.stringify({ pid: process.pid, address }));
};

const readSecrets = () => {
  const file = join(DATA_FOLDER, 'secrets.json');
  const word = (bytes) => randomBytes(bytes).toString('hex');
  const secrets = {
    tokenSecret: word(32),
    csrfSecret: word(32),
    stripeSecretKey: `sk_test_${word(16)}`,
    stripeWebhookSecret: `whsec_${word(16)}`,
    demoPassword: process.env.DEMO_PASSWORD || `saltmarsh-${word(4)}`,
    ...readJson(file),
  };
  writeFileSync(`${file}.new`, `${JSON.stringify(secrets, null, 2)}\n`, { mode: 0o600 });
  renameSync(`${file}.new`, file);
  return secrets;
};

/** The stand-ins keep their ports, so that an open payment page survives a restart. */
const readPorts = async () => {
  const file = join(DATA_FOLDER, 'ports.json');
  const known = readJson(file) ?? {};
  const ports = {};
  for (const name of ['smtp', 'payments'])
    ports[name] = (known[name] && (await canListen(known[name], '127.0.0.1'))) || (await canListen(0, '127.0.0.1'));
  writeFileSync(file, JSON.stringify(ports));
  return ports;
};

const knex = (command, env) => {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    ['--import', 'tsx', at('node_modules/knex/bin/cli.js'), command],
    { cwd: ROOT, env: { ...process.env, ...env }, encoding: 'utf8' },
  );
  if (status !== 0) throw new SetupError(`${command} failed:\n${stdout}${stderr}`);
  return stdout;
};

const step = async (what, work) => {
  const begun = performance.now();
  const done = await work();
  if (done !== false) console.log(`  ${what} (${((performance.now() - begun) / 1000).toFixed(1)} s)`);
  return done;
};

/** Asked of the database directly: starting the migration tool to hear that nothing is to be done takes seconds. */
const isMigrated = (cluster) => {
  if (cluster.query(DATABASE, `select to_regclass('knex_migrations')`) === '') return false;
  const done = cluster.query(DATABASE, 'select name from knex_migrations order by name').split('\n');
  return readdirSync(at('migrations')).sort().join('\n') === done.join('\n');
};

const prepareDatabase = async (cluster, demoPassword) => {
  const url = cluster.ownerUrl(DATABASE);
  cluster.ensureDatabase(DATABASE);
  await step('Database migrated', () => {
    if (isMigrated(cluster)) return false;
    knex('migrate:latest', { DATABASE_URL: url });
    return true;
  });
  const seededFile = join(DATA_FOLDER, 'seeded');
  const isEmpty = cluster.query(DATABASE, 'select count(*) from organisations') === '0';
  if (isEmpty || !existsSync(seededFile)) {
    await step(
      'Demo organisation seeded',
      () => void knex('seed:run', { DATABASE_URL: url, DEMO_PASSWORD: demoPassword }),
    );
    writeFileSync(seededFile, '');
  }
};

const typescript = (name, file, watchesParent, env) => ({
  ...{ name, env, watchesParent },
  args: ['--import', 'tsx', at(file)],
});

/** Whatever the API doesn't need in order to answer; started after it, so that people wait less. */
const addCompanions = (family, env) => {
  family.add(typescript('worker', 'api/worker.ts', true, env));
  if (env.MAIL_SINK_PORT) family.add(typescript('mail sink', 'api/adapters/mail/sink/main.ts', true, env));
  if (env.STRIPE_API_URL)
    family.add(typescript('payment stand-in', 'api/adapters/payments/stripe-mock/main.ts', false, env));
  if (reload) {
    const args = [VITE, 'build', '--watch', '--logLevel', 'warn'];
    family.add({ name: 'client build', args, env: { NODE_ENV: 'development' } });
  }
};

const whenReady = async (hasGivenUp) => {
  for (const begun = Date.now(); Date.now() - begun < READY_MS; await sleep(100)) {
    if (hasGivenUp()) return false;
    const health = await fetch(`http://127.0.0.1:${port}/api/health`).catch(() => null);
    if (health?.ok) return true;
  }
  throw new SetupError('The API didn’t get ready; see the messages above.');
};

/** The finished run a visitor finds, made once through the API, the queue and the engine. */
const makeDemoRun = (family, env) => {
  const marker = join(DATA_FOLDER, 'demo-made');
  if (!existsSync(at('api/bin/demo.ts')) || existsSync(marker) || process.env.DEMO_RUN === 'off') return;
  family.addOnce({
    args: ['--import', 'tsx', at('api/bin/demo.ts')],
    env,
    onDone: (code) => {
      if (code === 0) writeFileSync(marker, '');
      else console.log('The demo run could not be made; the next start tries again.');
    },
  });
};

const reloadOnChange = (family) => {
  let timer;
  watch(at('api'), { recursive: true }, (_event, file) => {
    if (!file || !/\.(ts|json)$/.test(file)) return;
    clearTimeout(timer);
    timer = setTimeout(() => family.restart(['API', 'worker']), 200);
  });
};

/** A database server that was killed comes back like everything else. */
const keepDatabase = async (isStopping) => {
  while (!isStopping()) {
    await sleep(DATABASE_LOOK_MS);
    if (isStopping() || clusterStatus().startsWith('running')) continue;
    console.log('The database ended; starting it again.');
    await startCluster().catch((error) => console.error(error.message));
  }
};

const printWelcome = (demoPassword) => {
  console.log(`
Gustloom is running at ${address}

  Sign in as          role                 e-mail
  Ines Halvard        underwriter          ines.halvard@saltmarsh.example
  Teodor Brask        modeler, approver    teodor.brask@saltmarsh.example
  Oda Renn            admin                oda.renn@saltmarsh.example
  Pell Quist          auditor              pell.quist@saltmarsh.example
  Password for all:   ${demoPassword}

  API description     ${address}/api/docs
  Mail it sent        ${address}/dev/mail

Ctrl-C stops it.`);
};

const main = async () => {
  await takeLock();
  let givenUp = false;
  let stopping;
  const family = new Family((name) => {
    console.error(`The ${name} can’t be kept running; see the messages above.`);
    givenUp = true;
    void stop(1);
  });
  const stop = (code) => {
    stopping ??= (async () => {
      console.log('\nStopping …');
      await family.stop();
      await stopCluster();
      rmSync(lockFile, { force: true });
      console.log('Stopped.');
      process.exit(code);
    })();
    return stopping;
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void stop(0));

  try {
    await step('npm packages installed', () => ensureNodePackages());
    const secrets = readSecrets();
    const cluster = await step('Database running', () => startCluster());
    await prepareDatabase(cluster, secrets.demoPassword);
    if (!reload) await step('Client built', () => ensureClient());

    const ports = await readPorts();
    const hasOwnMail = Boolean(process.env.SMTP_URL);
    const hasOwnPayments = Boolean(process.env.STRIPE_SECRET_KEY);
    const env = {
      NODE_ENV: process.env.NODE_ENV || 'development',
      PORT: String(port),
      PUBLIC_URL: address,
      DATABASE_URL: cluster.appUrl(DATABASE),
      TOKEN_SECRET: secrets.tokenSecret,
      CSRF_SECRET: secrets.csrfSecret,
      LOG_LEVEL: process.env.LOG_LEVEL || 'warn',
      MAIL_FROM: process.env.MAIL_FROM || 'Gustloom <no-reply@gustloom.example>',
      DEMO_PASSWORD: secrets.demoPassword,
      DEMO_URL: `http://127.0.0.1:${port}`,
      ...(!hasOwnMail && {
        SMTP_URL: `smtp://127.0.0.1:${ports.smtp}`,
        MAIL_SINK_PORT: String(ports.smtp),
        MAIL_SINK_FOLDER: join(DATA_FOLDER, 'mail'),
      }),
      ...(!hasOwnPayments && {
        STRIPE_SECRET_KEY: secrets.stripeSecretKey,
        STRIPE_WEBHOOK_SECRET: secrets.stripeWebhookSecret,
        STRIPE_API_URL: `http://127.0.0.1:${ports.payments}`,
      }),
    };
    if (stopping) return;
    family.add(typescript('API', 'api/server.ts', true, env));
    const isReady = await step('API ready', () => whenReady(() => givenUp || stopping));
    if (!isReady) return;
    addCompanions(family, env);
    if (reload) reloadOnChange(family);
    void keepDatabase(() => stopping !== undefined);
    printWelcome(secrets.demoPassword);
    makeDemoRun(family, env);
  } catch (error) {
    console.error(error instanceof SetupError ? error.message : error);
    await stop(1);
  }
};

main().catch((error) => {
  console.error(error instanceof SetupError ? error.message : error);
  process.exit(1);
});
