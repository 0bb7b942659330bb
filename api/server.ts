import { createApp } from './app.ts';
import { landIndex } from './compute/land.ts';
import { readConfig } from './config.ts';
import { createContainer } from './container.ts';
import { Reaper } from './jobs/reaper.ts';
import { whenAskedToStop } from './stopping.ts';

const config = readConfig(process.env);
const container = createContainer(config, 'api');
await container.queue.start();
// Here as well as in the workers: when the only worker is killed, its job is ready before it is back.
const reaper = new Reaper(config.databaseUrl, container.log);
reaper.start();
// Reading the land polygons takes a second: before anybody waits for it.
landIndex();

const server = createApp(container.appParts).listen(config.port, (error) => {
  if (!error) {
    process.send?.('ready');
    return;
  }
  const taken = (error as NodeJS.ErrnoException).code === 'EADDRINUSE';
  console.error(taken ? `Port ${config.port} is taken. Set PORT to another one.` : `Can’t listen: ${error.message}`);
  process.exit(1);
});

whenAskedToStop(container.log, async () => {
  const closed = new Promise((resolve) => server.close(resolve));
  server.closeIdleConnections();
  // Event streams never end by themselves.
  setTimeout(() => server.closeAllConnections(), 2_000).unref();
  await closed;
  await reaper.stop();
  await container.close();
});
