import { describe, expect, it } from 'vitest';
import type { Reconciliation } from '#contract/portfolios.ts';
import { createTestApp } from '../helpers/app.ts';
import { intakeSteps, schedule, SOUND } from '../helpers/intake.ts';
import { locationFile, USUAL_SLIPS } from '../helpers/location-file.ts';
import { DUNE, REEF } from '../helpers/people.ts';

const testApp = await createTestApp();
const { database, signIn } = testApp;
const browser = await signIn('underwriter');
const stranger = await signIn('underwriter', { org: REEF });
const auditor = await signIn('auditor');
const { newPortfolio, upload, uploaded, get, check, runCheck, checked } = intakeSteps(testApp, browser);

const groupsOf = async (editionId: string) =>
  (await browser.get(`/editions/${editionId}/messages`).expect(200)).body.groups as {
    code: string;
    rows: number;
    tivMinor: number;
    fix: { kind: string; label: string } | null;
  }[];
const rowsOf = async (editionId: string, query = '') =>
  (await browser.get(`/editions/${editionId}/rows?limit=500${query}`).expect(200)).body.items as {
    row: number;
    state: string;
    siteRef: string;
    tivMinor: number;
    latitude: number | null;
    longitude: number | null;
    received: Record<string, string>;
    corrected: boolean;
    messages: { code: string; severity: string; text: string }[];
  }[];
const fix = (editionId: string, code: string, kind: string, more = {}) =>
  browser.post(`/editions/${editionId}/fixes`, { code, kind, reason: 'Asked the broker', ...more });
const addsUp = ({ reconciliation }: { reconciliation: Reconciliation | null }) => {
  const { fileRows, tivMinor, ready, notes, held, setAside } = reconciliation!;
  const parts = [ready, notes, held, setAside];
  expect(parts.reduce((sum, { rows }) => sum + rows, 0)).toBe(fileRows);
  expect(parts.reduce((sum, part) => sum + part.tivMinor, 0)).toBe(tivMinor);
};

describe('a schedule as brokers send it', () => {
  const file = locationFile({
    sites: 600,
    preamble: ['Schedule of locations', 'As at 30 Nov 2026'],
    totalLine: true,
    slips: USUAL_SLIPS,
  });

  it('goes from file to sealed edition', async () => {
    const portfolio = await newPortfolio();
    const draft = await uploaded(portfolio.id, file.bytes, 'lodging.csv');
    expect(draft).toMatchObject({
      state: 'mapping',
      number: 1,
      style: { delimiter: ',', encoding: 'utf-8', headerRow: 3 },
    });
    expect(draft.columns.every(({ suggestion }) => suggestion?.confidence === 'sure')).toBe(true);

    const edition = await check(draft, { expectedRows: 602 });
    expect(edition.state).toBe('checked');
    expect(edition.reconciliation).toMatchObject({ fileRows: file.fileRows });
    addsUp(edition);
    expect(edition.assumptions).toEqual([expect.objectContaining({ attribute: 'construction', sites: 45 })]);

    const groups = new Map((await groupsOf(edition.id)).map((group) => [group.code, group]));
    expect(groups.get('PLACE-02')).toMatchObject({
      rows: 14,
      fix: { kind: 'swap_coordinates', label: 'Swap 14 rows' },
    });
    expect(groups.get('PLACE-03')).toMatchObject({
      rows: 6,
      fix: { kind: 'negate_longitude', label: 'Change 6 signs' },
    });
    expect(groups.get('SAME-01')).toMatchObject({ rows: 5 });
    expect(groups.get('FILE-07')).toMatchObject({ rows: 5, tivMinor: 0 });
    const swapped = await rowsOf(edition.id, '&code=PLACE-02');
    expect(swapped.map(({ row }) => row)).toEqual(file.slipped.swapped);

    const afterSwap = (await fix(edition.id, 'PLACE-02', 'swap_coordinates').expect(201)).body;
    addsUp(afterSwap);
    expect(afterSwap.reconciliation.held.rows).toBe(edition.reconciliation!.held.rows - 14);
    expect(afterSwap.reconciliation.notes.rows).toBe(edition.reconciliation!.notes.rows + 14);
    const [first] = await rowsOf(edition.id, '&code=PLACE-21');
    expect(first).toMatchObject({ state: 'notes', corrected: true });
    expect(String(first!.latitude)).toBe(String(Number(first!.received.longitude)));
    await fix(edition.id, 'PLACE-03', 'negate_longitude').expect(201);

    await browser.delete(`/editions/${edition.id}/fixes/last`).expect(200);
    const undone = (await browser.delete(`/editions/${edition.id}/fixes/last`).expect(200)).body;
    expect(undone.reconciliation).toEqual(edition.reconciliation);
    await browser.delete(`/editions/${edition.id}/fixes/last`).expect(409);
    await fix(edition.id, 'PLACE-02', 'swap_coordinates').expect(201);

    const blocked = await browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }).expect(409);
    expect(blocked.body).toMatchObject({ code: 'seal_blocked', faults: [{ path: 'body.heldReason' }] });
    const sealed = (
      await browser
        .post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30', heldReason: 'Broker answers in January' })
        .expect(200)
    ).body;
    expect(sealed).toMatchObject({ state: 'sealed', asAt: '2026-11-30', heldReason: 'Broker answers in January' });
    expect(sealed.digest).toMatch(/^[0-9a-f]{64}$/);

    const sites = await database.superUser('sites').where({ edition_id: edition.id }).orderBy('site_no');
    const { ready, notes } = sealed.reconciliation;
    expect(sites).toHaveLength(ready.rows + notes.rows);
    expect(sites.map(({ site_no: no }) => no)).toEqual(sites.map((_, index) => index + 1));
    expect(sites.map(({ file_row: row }) => row)).toEqual(
      sites.map(({ file_row: row }) => row).toSorted((a, b) => a - b),
    );
    const tiv = sites.reduce((sum, site) => sum + Number(site.tiv_minor), 0);
    expect(tiv).toBe(ready.tivMinor + notes.tivMinor);

    const portfolioNow = (await browser.get(`/portfolios/${portfolio.id}`).expect(200)).body;
    expect(portfolioNow).toMatchObject({ current: { number: 1, state: 'sealed' }, draft: null });
    const actions = await database
      .superUser('audit_entries')
      .where({ object: `edition:${edition.id}` })
      .orderBy('at')
      .pluck('action');
    expect(new Set(actions)).toEqual(
      new Set([
        'portfolio.file_uploaded',
        'portfolio.columns_mapped',
        'portfolio.fix_applied',
        'portfolio.fix_undone',
        'portfolio.edition_sealed',
      ]),
    );
  });

  it('is recognised when the very same file comes again, and mapped as before', async () => {
    const small = locationFile({ sites: 40, slips: {}, seed: 9 }).bytes;
    const portfolio = await newPortfolio();
    const first = await check(await uploaded(portfolio.id, small));
    const sealed = (await browser.post(`/editions/${first.id}/seal`, { asAt: '2026-11-30' }).expect(200)).body;
    const again = await uploaded(portfolio.id, small);
    expect(again).toMatchObject({ number: 2, messages: [{ code: 'FILE-10', severity: 'note' }] });
    expect(again.messages[0]!.text).toContain('the same file as edition 1 (uploaded on 1 December 2026)');
    expect(again.columns.every(({ field, suggestion }) => field !== null && suggestion?.confidence === 'sure')).toBe(
      true,
    );
    const second = await check(again);
    const resealed = (await browser.post(`/editions/${second.id}/seal`, { asAt: '2026-11-30' }).expect(200)).body;
    expect(resealed.digest).toBe(sealed.digest);
  });
});

describe('states and fixes', () => {
  it('frees the row that is left when its rival is excluded, and holds both again when that is undone', async () => {
    const other = SOUND.replace('S-1', 'S-2').replace('26.640001', '26.650001');
    const edition = await checked(schedule(SOUND, SOUND.replace('1000000', '2000000'), other));
    expect(edition.reconciliation).toMatchObject({ ready: { rows: 1 }, held: { rows: 2 } });
    const freed = (await fix(edition.id, 'SAME-02', 'exclude', { rows: [3] }).expect(201)).body;
    expect(freed.reconciliation).toMatchObject({
      ready: { rows: 2 },
      held: { rows: 0 },
      setAside: { rows: 1, tivMinor: 225000000 },
    });
    const undone = (await browser.delete(`/editions/${edition.id}/fixes/last`).expect(200)).body;
    expect(undone.reconciliation).toEqual(edition.reconciliation);
    expect((await rowsOf(edition.id)).map(({ state }) => state)).toEqual(['held', 'held', 'ready']);
  });

  it('keeps a repeat under a reference of its own', async () => {
    const edition = await checked(schedule(SOUND, SOUND));
    expect(edition.reconciliation).toMatchObject({ ready: { rows: 1 }, setAside: { rows: 1, tivMinor: 125000000 } });
    await fix(edition.id, 'SAME-01', 'keep_all').expect(201);
    expect((await rowsOf(edition.id)).map(({ siteRef, state }) => [siteRef, state])).toEqual([
      ['S-1', 'ready'],
      ['S-1-row-3', 'notes'],
    ]);
  });

  it('confirms a site at sea, which then has no terrain', async () => {
    const rig = 'S-2,27.500001,-84.600001,US,1000000,0,Steel frame,Office,Open,Amount,"10,000"';
    const edition = await checked(schedule(SOUND, rig));
    expect(edition.reconciliation).toMatchObject({ ready: { rows: 1 }, held: { rows: 1 } });
    await fix(edition.id, 'PLACE-07', 'keep_all').expect(201);
    await browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }).expect(200);
    const sites = await database.superUser('sites').where({ edition_id: edition.id }).orderBy('site_no');
    expect(sites.map((site) => [site.roughness_m, site.deductible_minor])).toEqual([
      [0.3, '2500000'],
      [null, '1000000'],
    ]);
  });

  it('refuses a fix that doesn’t help, rows that haven’t the message, and rows somebody fixed meanwhile', async () => {
    const edition = await checked(schedule(SOUND, SOUND.replace('S-1', 'S-2').replace('-81.800001', '81.800001')));
    await fix(edition.id, 'PLACE-03', 'swap_coordinates').expect(422);
    await fix(edition.id, 'PLACE-99', 'exclude').expect(422);
    await fix(edition.id, 'PLACE-03', 'negate_longitude', { rows: [2, 3] }).expect(409);
    await fix(edition.id, 'PLACE-03', 'negate_longitude').expect(201);
    await fix(edition.id, 'PLACE-03', 'negate_longitude').expect(409);
  });

  it('starts again from the file when the columns are mapped anew', async () => {
    const edition = await checked(schedule(SOUND, SOUND.replace('S-1', 'S-2').replace('-81.800001', '81.800001')));
    await fix(edition.id, 'PLACE-03', 'negate_longitude').expect(201);
    const again = await check(edition, { expectedRows: 2 });
    expect(again).toMatchObject({ state: 'checked', fixes: [], reconciliation: { held: { rows: 1 } } });
    expect(await rowsOf(edition.id)).toHaveLength(2);
  });

  it('leaves its rows once when a check is carried out twice or too late', async () => {
    const draft = await uploaded((await newPortfolio()).id, schedule(SOUND));
    const columns = draft.columns.map(({ index, suggestion }) => ({ index, field: suggestion!.field }));
    await browser.put(`/editions/${draft.id}/mapping`, { columns, currency: 'USD' }).expect(202);
    await expect(runCheck(draft.id, AbortSignal.abort())).rejects.toThrow('stopping');
    expect((await get(draft.id)).state).toBe('checking');
    await Promise.all([runCheck(draft.id), runCheck(draft.id)]);
    await runCheck(draft.id);
    expect(await rowsOf(draft.id)).toHaveLength(1);
  });
});

describe('sealing', () => {
  it('asks for a reason when control totals don’t tie', async () => {
    const edition = await checked(schedule(SOUND), { expectedRows: 2, expectedTivMinor: 125_100_000 });
    expect(edition.messages[0]).toMatchObject({
      code: 'FILE-06',
      severity: 'blocks_sealing',
      text: 'You told us to expect 2 rows and 1,251,000. We read 1 row and 1,250,000. One row and 1,000 are missing. Check before you seal.',
    });
    const refused = await browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }).expect(409);
    expect(refused.body.faults).toEqual([expect.objectContaining({ path: 'body.controlReason', code: 'FILE-06' })]);
    const body = { asAt: '2026-11-30', controlReason: 'The broker counts a site sold in May' };
    expect((await browser.post(`/editions/${edition.id}/seal`, body).expect(200)).body.controlReason).toBe(
      body.controlReason,
    );
  });

  it('waits for the answer whether values stand in thousands, and multiplies only when told', async () => {
    const inThousands = schedule(SOUND.replace('1000000,250000', '1000,250'));
    const edition = await checked(inThousands);
    expect(edition.messages).toContainEqual(expect.objectContaining({ code: 'FILE-05', severity: 'stop' }));
    expect(edition.reconciliation!.tivMinor).toBe(125_000);
    await browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }).expect(409);
    const answered = await check(edition, { valuesIn: 'thousands' });
    expect(answered.reconciliation!.tivMinor).toBe(125_000_000);
    await browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }).expect(200);
  });

  it('leaves an edition that nothing changes any more, not even by SQL', async () => {
    const edition = await checked(schedule(SOUND, SOUND.replace('S-1', 'S-2').replace('26.640001', '')));
    await browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30', heldReason: 'No answer yet' }).expect(200);
    for (const change of [
      fix(edition.id, 'PLACE-01', 'exclude'),
      browser.delete(`/editions/${edition.id}/fixes/last`),
      browser.put(`/editions/${edition.id}/mapping`, { columns: [], currency: 'USD' }),
      browser.post(`/editions/${edition.id}/seal`, { asAt: '2026-12-01' }),
    ]) {
      expect((await change.expect(409)).body.code).toBe('edition_sealed');
    }
    const inSql = (sql: string) => database.transact(DUNE.id, (tx) => tx.raw(sql, [edition.id]));
    for (const sql of [
      `update editions set held_reason = 'none' where id = ?`,
      `delete from editions where id = ?`,
      `update sites set tiv_minor = 1 where edition_id = ?`,
      `delete from sites where edition_id = ?`,
      `insert into sites select (jsonb_populate_record(sites, '{"site_no": 99, "site_ref": "new"}')).* from sites where edition_id = ?`,
      `update intake_rows set tiv_minor = 1 where edition_id = ?`,
      `delete from intake_rows where edition_id = ?`,
      `update intake_rows set edition_id = gen_random_uuid() where edition_id = ?`,
    ]) {
      await expect(inSql(sql), sql).rejects.toThrow(/sealed|stay in their edition/);
    }
  });

  it('refuses a draft that isn’t checked, and one with nothing to score', async () => {
    const draft = await uploaded((await newPortfolio()).id, schedule(SOUND));
    const early = await browser.post(`/editions/${draft.id}/seal`, { asAt: '2026-11-30' }).expect(409);
    expect(early.body.code).toBe('edition_not_ready');
    const empty = await checked(schedule(SOUND.replace('26.640001', '')));
    const refused = await browser
      .post(`/editions/${empty.id}/seal`, { asAt: '2026-11-30', heldReason: 'all' })
      .expect(409);
    expect(refused.body.detail).toContain('No row can be scored');
  });
});

describe('who may do what', () => {
  it('answers strangers as if nothing were there', async () => {
    const edition = await checked(schedule(SOUND));
    const ask = [
      stranger.get(`/portfolios/${edition.portfolioId}`),
      stranger.get(`/editions/${edition.id}`),
      stranger.get(`/editions/${edition.id}/rows`),
      stranger.get(`/editions/${edition.id}/messages`),
      stranger.get(`/editions/${edition.id}/points`),
      stranger.put(`/editions/${edition.id}/mapping`, { columns: [], currency: 'USD' }),
      stranger.post(`/editions/${edition.id}/fixes`, { code: 'PLACE-01', kind: 'exclude', reason: 'mine now' }),
      stranger.delete(`/editions/${edition.id}/fixes/last`),
      stranger.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }),
      stranger.post(`/portfolios/${edition.portfolioId}/files`).attach('file', Buffer.from(schedule(SOUND)), 'a.csv'),
    ];
    for (const request of ask) expect((await request.expect(404)).body.code).toBe('not_found');
    expect((await stranger.get('/portfolios').expect(200)).body.items).toEqual([]);
  });

  it('lets auditors read and change nothing', async () => {
    const edition = await checked(schedule(SOUND));
    await auditor.get(`/editions/${edition.id}/rows`).expect(200);
    await auditor.post(`/editions/${edition.id}/seal`, { asAt: '2026-11-30' }).expect(403);
    await auditor.post('/portfolios', { name: 'Mine', currency: 'USD' }).expect(403);
  });
});

describe('portfolios', () => {
  it('have names of their own and currencies with cents', async () => {
    await browser.post('/portfolios', { name: 'Harbour book', currency: 'USD' }).expect(201);
    expect((await browser.post('/portfolios', { name: 'Harbour book', currency: 'USD' }).expect(409)).body.code).toBe(
      'conflict',
    );
    expect(
      (await browser.post('/portfolios', { name: 'Yen book', currency: 'JPY' }).expect(422)).body.detail,
    ).toContain('JPY');
    await browser.post('/portfolios', { name: '  ', currency: 'USD' }).expect(422);
  });
  it('are listed a page at a time', async () => {
    const first = (await browser.get('/portfolios?limit=2').expect(200)).body;
    expect(first.items).toHaveLength(2);
    const second = (await browser.get(`/portfolios?limit=2&cursor=${first.nextCursor}`).expect(200)).body;
    expect(second.items[0].id).not.toBe(first.items[0].id);
    expect([...first.items, ...second.items].map(({ name }) => name)).toEqual(
      [...first.items, ...second.items].map(({ name }) => name).toSorted(),
    );
  });
});

describe('files that can’t be taken in', () => {
  const refused = async (bytes: Buffer | string, name?: string) => {
    const portfolio = await newPortfolio();
    const before = await database.superUser('file_chunks').count('* as n').first();
    const reply = await upload(portfolio.id, bytes, name);
    expect((await browser.get(`/portfolios/${portfolio.id}`)).body).toMatchObject({ draft: null, editions: [] });
    expect(await database.superUser('file_chunks').count('* as n').first()).toEqual(before);
    return { status: reply.status, code: reply.body.code as string, detail: reply.body.detail as string };
  };
  it('are refused by what they are, not by their name', async () => {
    const png = Buffer.concat([Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]), Buffer.alloc(400, 7)]);
    expect(await refused(png)).toMatchObject({
      status: 422,
      code: 'file_unreadable',
      detail: expect.stringContaining('a PNG picture'),
    });
    const xlsx = Buffer.concat([Buffer.from([0x50, 0x4b, 3, 4]), Buffer.from('....[Content_Types].xml')]);
    expect((await refused(xlsx)).detail).toContain('Excel workbook');
    expect((await refused('')).detail).toContain('empty');
    expect((await refused('Ref,Lat,Lon\n')).detail).toContain('no rows');
    expect((await refused('1,2,3\n4,5,6\n')).detail).toContain('header row in the first 20 lines');
    expect((await refused(schedule('S-1,\u0000,2'))).detail).toContain('NUL');
    expect((await refused(schedule('S-1,"26.1,2', SOUND, SOUND))).detail).toMatch(/isn't closed/);
  });
  it('are refused by their figures', async () => {
    expect((await refused(schedule(`${'x'.repeat(501)},26,-81`))).detail).toContain('501 characters. The limit is 500');
    expect((await refused(`${Array.from({ length: 201 }, (_, i) => `c${i}`).join(',')}\n1\n`)).detail).toContain(
      '201 columns. The limit is 200',
    );
    const large = Buffer.alloc(62 * 1024 * 1024, 'Ref,Lat\n');
    expect(await refused(large)).toEqual({
      status: 413,
      code: 'file_too_large',
      detail:
        "This file is 62 MB. The limit is 50 MB. Split it by region or remove columns you don't need, then upload the parts to the same portfolio.",
    });
  });
  it('leave an earlier draft as it was', async () => {
    const portfolio = await newPortfolio();
    const draft = await uploaded(portfolio.id, schedule(SOUND));
    await upload(portfolio.id, '').expect(422);
    expect((await browser.get(`/portfolios/${portfolio.id}`)).body.draft.id).toBe(draft.id);
    const next = await uploaded(portfolio.id, schedule(SOUND, SOUND.replace('S-1', 'S-2')));
    await browser.get(`/editions/${draft.id}`).expect(404);
    expect(next.number).toBe(1);
  });
  it('must come in the field file', async () => {
    const portfolio = await newPortfolio();
    await browser
      .post(`/portfolios/${portfolio.id}/files`)
      .attach('other', Buffer.from('a,b\n1,2'), 'a.csv')
      .expect(422);
    await browser.post(`/portfolios/${portfolio.id}/files`).field('name', 'x').expect(422);
  });
});

describe('mapping', () => {
  it('refuses two columns for one field, by their names', async () => {
    const draft = await uploaded((await newPortfolio()).id, 'Ref,Bldg,Building RC,Lat,Lon\nS-1,1,2,26.1,-81.1\n');
    const columns = [
      { index: 1, field: 'building_value' },
      { index: 2, field: 'building_value' },
    ];
    const reply = await browser.put(`/editions/${draft.id}/mapping`, { columns, currency: 'USD' }).expect(422);
    expect(reply.body.faults).toEqual([
      {
        path: 'body.columns.1',
        message: "Two columns are mapped to building value: 'Bldg' and 'Building RC'. Choose one.",
        code: 'FILE-04',
      },
    ]);
  });
  it('shows formula cells as they stand and keeps columns left out of the database', async () => {
    const formula = '=HYPERLINK("http://x";"y")';
    const edition = await checked(
      `Ref,Site name,Lat,Lon,Building,Secret notes\nS-1,"${formula.replaceAll('"', '""')}",26.64,-81.8,1000000,tell nobody\n`,
    );
    const [row] = await rowsOf(edition.id);
    expect(row!.received.site_label).toBe(formula);
    expect(JSON.stringify(await database.superUser('intake_rows').where({ edition_id: edition.id }))).not.toContain(
      'tell nobody',
    );
  });
  it('numbers lines as they stand in the file, a quoted line break counting once', async () => {
    const edition = await checked(
      `Ref,Site name,Lat,Lon,Building\nS-1,"two\nlines",26.640001,-81.8,1000000\nS-2,b,,,1000000\n`,
    );
    expect((await rowsOf(edition.id, '&code=PLACE-01')).map(({ row }) => row)).toEqual([3]);
  });
  it('gives the map a point for each row with coordinates', async () => {
    const edition = await checked(schedule(SOUND.replace('26.640001', ''), SOUND.replace('S-1', 'S-2')));
    expect((await browser.get(`/editions/${edition.id}/points`).expect(200)).body).toEqual({
      siteNo: [1],
      row: [3],
      ref: ['S-2'],
      latitude: [26.640001],
      longitude: [-81.800001],
      tivMinor: [125000000],
      state: ['ready'],
    });
  });
});

it('reads the same sites from every delimiter and encoding', async () => {
  const sites = async (bytes: Buffer, encoding: string, delimiter: string) => {
    const edition = await checked(bytes);
    expect(edition.style).toMatchObject({ encoding, delimiter });
    return (await rowsOf(edition.id)).map(({ messages: _, ...row }) => row);
  };
  const made = (options: object) => locationFile({ sites: 20, slips: {}, ...options }).bytes;
  const accented = (bytes: Buffer, from: 'utf8' | 'latin1' | 'utf16le') =>
    Buffer.from(bytes.toString(from).replaceAll('Heron', 'Hérøn'), from);
  const plain = await sites(accented(made({}), 'utf8'), 'utf-8', ',');
  expect(plain).toHaveLength(20);
  expect(JSON.stringify(plain)).toContain('Hérøn');
  expect(await sites(accented(made({ encoding: 'utf-8-bom' }), 'utf8'), 'utf-8', ',')).toEqual(plain);
  expect(await sites(accented(made({ encoding: 'utf-16le', delimiter: ';' }), 'utf16le'), 'utf-16le', ';')).toEqual(
    plain,
  );
  expect(
    await sites(accented(made({ encoding: 'windows-1252', delimiter: '|' }), 'latin1'), 'windows-1252', '|'),
  ).toEqual(plain);
  expect(await sites(accented(made({ delimiter: '\t' }), 'utf8'), 'utf-8', '\t')).toEqual(plain);
});

it('asks for names without zero bytes, which no database holds', async () => {
  const reply = await browser.post('/portfolios', { name: 'Cedar\u0000Key', currency: 'USD' }).expect(422);
  expect(reply.body).toMatchObject({ code: 'invalid_request', detail: expect.stringContaining('zero byte') });
});
