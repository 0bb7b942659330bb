import type { Edition, Mapping } from '#contract/portfolios.ts';
import type { z } from 'zod';
import { Edition as EditionSchema, Portfolio as PortfolioSchema } from '#contract/portfolios.ts';
import { CHECK_QUEUE } from '../../api/features/portfolios/check-payload.ts';
import type { Browser, TestApp } from './app.ts';
import type { TestOrganisation } from './people.ts';
import { DUNE } from './people.ts';

let portfolios = 0;

/** The steps of intake as a person's browser takes them, the check carried out in this process. */
export const intakeSteps = ({ container, database }: TestApp, browser: Browser, org: TestOrganisation = DUNE) => {
  const newPortfolio = async (currency = 'USD') => {
    const reply = await browser.post('/portfolios', { name: `Lodging ${(portfolios += 1)}`, currency }).expect(201);
    return PortfolioSchema.parse(reply.body);
  };
  const upload = (portfolioId: string, bytes: Buffer | string, name = 'schedule.csv') =>
    browser.post(`/portfolios/${portfolioId}/files`).attach('file', Buffer.from(bytes as Buffer), name);
  const uploaded = async (portfolioId: string, bytes: Buffer | string, name?: string) =>
    EditionSchema.parse((await upload(portfolioId, bytes, name).expect(201)).body);
  const get = async (editionId: string) =>
    EditionSchema.parse((await browser.get(`/editions/${editionId}`).expect(200)).body);

  /** Maps as suggested and runs the check that this put into the queue. */
  const check = async (edition: Edition, more: Partial<z.input<typeof Mapping>> = {}): Promise<Edition> => {
    const columns = edition.columns.flatMap(({ index, suggestion }) =>
      suggestion ? [{ index, field: suggestion.field }] : [],
    );
    await browser.put(`/editions/${edition.id}/mapping`, { columns, currency: 'USD', ...more }).expect(202);
    await runCheck(edition.id);
    return get(edition.id);
  };
  const runCheck = async (editionId: string, signal = new AbortController().signal) => {
    const jobs = await database.superUser('pgboss.job').where({ name: CHECK_QUEUE }).orderBy('created_on');
    const data = (jobs as { data: { orgId: string; editionId: string } }[])
      .map((job) => job.data)
      .findLast((payload) => payload.editionId === editionId && payload.orgId === org.id);
    await container.checkJob.run({ data, restarts: 0, signal });
  };
  const checked = async (bytes: Buffer | string, more: Partial<z.input<typeof Mapping>> = {}) =>
    check(await uploaded((await newPortfolio()).id, bytes), more);
  return { newPortfolio, upload, uploaded, get, check, runCheck, checked };
};

/** A schedule of a few columns, one line a site. */
export const schedule = (...lines: string[]) =>
  ['Ref,Lat,Lon,Country,Building,Contents,Construction,Occupancy,Terrain,Ded type,Deductible', ...lines].join('\n');
export const SOUND = 'S-1,26.640001,-81.800001,US,1000000,250000,CBS,Hotel,Suburban,% of site value,2%';
