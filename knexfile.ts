/** Knex command line: `npm run knex -- migrate:latest`. Reads DATABASE_URL (an owner role, not the app's). */
export default {
  client: 'pg',
  connection: process.env.DATABASE_URL,
  migrations: { directory: './migrations', extension: 'ts', loadExtensions: ['.ts'] },
  seeds: { directory: './seeds', extension: 'ts', loadExtensions: ['.ts'] },
};
