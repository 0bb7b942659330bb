import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import type { SealedSite } from '../../api/features/portfolios/intake/site.ts';
import { PortfolioReader } from '../../api/features/portfolios/portfolio-reader.ts';
import { testDatabase } from '../helpers/database.ts';
import { addOrganisations, DUNE, REEF } from '../helpers/people.ts';
import { addRunFixture } from '../helpers/run-fixture.ts';

const database = await testDatabase();
const { owner, superUser, transact } = database;
await addOrganisations(owner, DUNE, REEF);
const SITES = 23;
// Draft, so that rows can be moved about below; the reader asks no state.
const { editionId, portfolioId } = await addRunFixture(database, { sites: SITES, sealed: false });
await addRunFixture(database, { org: REEF, sites: 5 });
// On disk the rows lie in another order than that of their numbers.
await superUser('sites').where({ edition_id: editionId }).whereRaw('site_no % 3 = 0').update({ label: 'Moved' });

const reader = new PortfolioReader();
const batchesOf = (size: number, org = DUNE, edition = editionId): Promise<SealedSite[][]> =>
  transact(org.id, async (tx) => {
    const batches: SealedSite[][] = [];
    for await (const batch of reader.siteBatches(tx, org.id, edition, size)) batches.push(batch);
    return batches;
  });
const inOrder = Array.from({ length: SITES }, (_, i) => i + 1);

describe('the sites of an edition, batch by batch', () => {
  // One by one, an odd rest, no rest, all but one, all, more than all.
  it.each([1, 4, 23, 22, 24, 1000])('come in site order, none lost and none twice, %i at a time', async (size) => {
    const batches = await batchesOf(size);
    expect(batches.flat().map(({ siteNo }) => siteNo)).toEqual(inOrder);
    expect(batches.map(({ length }) => length)).toEqual(
      Array.from({ length: Math.ceil(SITES / size) }, (_, i) => Math.min(size, SITES - i * size)),
    );
  });
  it('jump over numbers that aren’t there', async () => {
    await superUser('sites').where({ edition_id: editionId }).whereIn('site_no', [1, 8, 9, 10, 23]).delete();
    const numbers = (await batchesOf(3)).flat().map(({ siteNo }) => siteNo);
    expect(numbers).toEqual(inOrder.filter((no) => ![1, 8, 9, 10, 23].includes(no)));
  });
  it('tie with the table to the cent, and missing limits stay missing', async () => {
    const sites = (await batchesOf(5)).flat();
    const [sums] = await superUser('sites')
      .where({ edition_id: editionId })
      .select(superUser.raw('sum(tiv_minor)::float8 as tiv, sum(deductible_minor)::float8 as deductible'))
      .select(superUser.raw('sum(limit_minor)::float8 as limits, count(limit_minor)::int as limited'));
    expect({
      tiv: sites.reduce((sum, site) => sum + site.tivMinor, 0),
      deductible: sites.reduce((sum, site) => sum + site.deductibleMinor, 0),
      limits: sites.reduce((sum, site) => sum + (site.limitMinor ?? 0), 0),
      limited: sites.filter(({ limitMinor }) => limitMinor !== null).length,
    }).toEqual(sums);
  });
  it('are those whose coordinates a quote counts, in the same order', async () => {
    const sites = (await batchesOf(7)).flat();
    const { siteNo, latitude, longitude } = await transact(DUNE.id, (tx) => reader.coordinates(tx, DUNE.id, editionId));
    expect(sites.map((site) => [site.siteNo, site.latitude, site.longitude])).toEqual(
      Array.from(siteNo, (no, i) => [no, latitude[i], longitude[i]]),
    );
  });
  it('are none for an edition that isn’t there', async () => {
    expect(await batchesOf(10, DUNE, randomUUID())).toEqual([]);
    expect(await transact(DUNE.id, (tx) => reader.findEdition(tx, DUNE.id, randomUUID()))).toBeNull();
  });
});

describe('another organisation', () => {
  it('sees nothing of it', async () => {
    expect(await batchesOf(10, REEF)).toEqual([]);
    await transact(REEF.id, async (tx) => {
      expect(await reader.findEdition(tx, REEF.id, editionId)).toBeNull();
      expect((await reader.coordinates(tx, REEF.id, editionId)).siteNo).toHaveLength(0);
    });
  });
  it('sees nothing even where the caller’s name for the organisation is wrong', async () => {
    // Row-level security holds by itself: the transaction is another organisation's.
    await transact(REEF.id, async (tx) => {
      expect(await reader.findEdition(tx, DUNE.id, editionId)).toBeNull();
      expect(await reader.sitesAfter(tx, DUNE.id, editionId, 0, 10)).toEqual([]);
    });
    // And so does the condition, were row-level security switched off.
    await superUser.transaction(async (tx) => {
      expect(await reader.findEdition(tx, REEF.id, editionId)).toBeNull();
      expect(await reader.sitesAfter(tx, REEF.id, editionId, 0, 10)).toEqual([]);
    });
  });
  it('is not what hides it from its own', async () => {
    const header = await transact(DUNE.id, (tx) => reader.findEdition(tx, DUNE.id, editionId));
    expect(header).toMatchObject({ id: editionId, portfolioId, number: 1, state: 'checked', currency: 'USD' });
  });
});
