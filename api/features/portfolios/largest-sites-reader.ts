import type { Tx } from '../../transact.ts';
import type { EditionStore } from './edition-store.ts';
import { sealedSite, type SealedSite } from './intake/site.ts';
import type { IntakeStore } from './intake-store.ts';
import type { PortfolioReader } from './portfolio-reader.ts';

type Test = (latitude: number, longitude: number) => boolean;

export interface LargestSites {
  /** By falling value; equal values in site order. */
  sites: SealedSite[];
  /** Sites that are ready to be scored, whatever the test says. */
  of: number;
  edition: string;
  currency: string;
}

interface Parts {
  portfolios: PortfolioReader;
  editions: EditionStore;
  intake: IntakeStore;
}

const SITES_AT_ONCE = 5_000;

/** Answers studies: the largest values among an edition’s sites that pass a test, sealed or only checked. */
export class LargestSitesReader {
  constructor(private readonly parts: Parts) {}

  /** Null when the edition isn’t there; no sites while its checks aren’t finished. */
  async largestSites(
    tx: Tx,
    orgId: string,
    editionId: string,
    most: number,
    passes: Test,
  ): Promise<LargestSites | null> {
    const header = await this.parts.portfolios.findEdition(tx, orgId, editionId);
    if (!header) return null;
    const largest = new Largest(most);
    const batches =
      header.state === 'sealed'
        ? this.parts.portfolios.siteBatches(tx, orgId, editionId, SITES_AT_ONCE)
        : header.state === 'checked'
          ? this.checked(tx, orgId, editionId)
          : [];
    let of = 0;
    for await (const sites of batches) {
      of += sites.length;
      for (const site of sites) if (largest.takes(site) && passes(site.latitude, site.longitude)) largest.add(site);
    }
    const { portfolioName, number, currency } = header;
    return { sites: largest.sites(), of, edition: `${portfolioName}, edition ${number}`, currency };
  }

  /** The sites a checked draft would have if it were sealed now. */
  private async *checked(tx: Tx, orgId: string, editionId: string): AsyncGenerator<SealedSite[]> {
    const record = await this.parts.editions.find(tx, orgId, editionId);
    const facts = record?.survey?.facts;
    if (!facts) return;
    let siteNo = 0;
    for await (const rows of this.parts.intake.scored(tx, orgId, editionId, SITES_AT_ONCE)) {
      yield rows.map(({ row, corrections, ...judged }) => sealedSite((siteNo += 1), row, corrections, facts, judged));
    }
  }
}

/** So many of the largest, kept with little more than so many in memory. */
class Largest {
  private kept: SealedSite[] = [];
  private least = -Infinity;

  constructor(private readonly most: number) {}

  takes({ tivMinor }: SealedSite): boolean {
    return tivMinor > this.least;
  }

  add(site: SealedSite): void {
    this.kept.push(site);
    if (this.kept.length < 4 * this.most) return;
    this.kept = this.sites();
    this.least = this.kept.at(-1)!.tivMinor;
  }

  sites(): SealedSite[] {
    const ordered = [...this.kept].sort((a, b) => b.tivMinor - a.tivMinor || a.siteNo - b.siteNo);
    return ordered.slice(0, this.most);
  }
}
