import { describe, expect, it } from 'vitest';
import { eventSummary, scoreSites, type SiteScores } from '#engine/footprint/site-peaks.ts';
import { REFERENCE_CURVE } from '#engine/loss/damage-curve.ts';
import { azimuthalShape, radialShape } from '#engine/ring/draws.ts';
import { DEFAULT_OPTIONS, type ChainOptions } from '#engine/track/options.ts';
import { prepareStorm, STATE, STATE_SIZE, type Storm } from '#engine/track/storm.ts';
import { siteSeries } from '#engine/footprint/site-series.ts';
import { windAt, type Site } from '#engine/footprint/wind-at.ts';
import { expectPrinted } from '../helpers/printed.ts';
import {
  batchOf,
  mirroredFixes,
  mirroredSite,
  workedFixes,
  workedSites,
  type TestSite,
} from '../helpers/worked-storm.ts';

const stormOf = (options: Partial<ChainOptions>): Storm =>
  prepareStorm(workedFixes, { ...DEFAULT_OPTIONS, ...options }, null);
const scoresOf = (storm: Storm, sites: readonly TestSite[] = workedSites): SiteScores =>
  scoreSites(storm, batchOf(sites), REFERENCE_CURVE);
const sum = (values: Float64Array): number => values.reduce((a, b) => a + b, 0);
const stateAt = (storm: Storm, timeS: number): number => {
  for (let k = 0; k < storm.stateCount; k++) if (storm.states[k * STATE_SIZE + STATE.timeS] === timeS) return k;
  throw new Error(`no state at ${timeS} s`);
};
const asSite = (site: TestSite): Site => ({
  latitude: site.latitude,
  longitude: site.longitude,
  roughnessM: site.roughness,
  fetchM: site.fetch,
  topographicFactor: site.hill,
});

type Column = keyof SiteScores;
const expectColumns = (scores: SiteScores, site: number, row: Partial<Record<Column, string>>): void => {
  for (const [column, printed] of Object.entries(row)) expectPrinted(scores[column as Column][site]!, printed);
};

// Computed from the published formulas by an independent reference implementation: regression anchors of the chain.
describe('the worked storm, intensity from pressure, anchor auto', () => {
  const storm = stormOf({});
  const scores = scoresOf(storm);

  it('resolves every fix', () => {
    const expected = {
      translationMs: ['5.902122', '6.180424', '6.736453', '7.364229', '7.720672'],
      maxWindMs: ['46.132510', '48.323160', '49.444250', '44.492041', '35.448272'],
      axisymmetricMaxWindMs: ['42.724034', '44.753966', '45.553948', '40.239199', '30.989583'],
      averageVorticityPerS: ['0.002136202', '0.002355472', '0.002530775', '0.002011960', '0.001291233'],
      amplitude: ['0.07182993', '0.08682472', '0.09273407', '0.05347484', '0'],
      patternRadPerS: ['6.43554998e-4', '7.09612623e-4', '7.62424643e-4', '6.06125755e-4', '3.88998477e-4'],
    } as const;
    expect(storm.wavenumber).toBe(4);
    for (const [field, values] of Object.entries(expected)) {
      values.forEach((printed, i) => expectPrinted(storm.fixes[i]![field as 'maxWindMs'], printed));
    }
    expect(storm.fixes.map(({ anchor }) => anchor)).toEqual(new Array(5).fill('mean'));
  });
  it('turns the pattern', () => {
    const angle = (hour: number) => storm.states[stateAt(storm, hour * 3600) * STATE_SIZE + STATE.patternAngle]!;
    expectPrinted(angle(12), '30.5122128');
    expectPrinted(angle(15), '38.3243919');
  });
  it('has the vortex of S1 at 12 h, and its number of times', () => {
    const k = stateAt(storm, 43_200);
    const wind = windAt(storm, k, asSite(workedSites[0]!));
    expectPrinted(((90 - wind.bearingDeg) * Math.PI) / 180, '0.00125690');
    const shape = radialShape(wind.distanceM / storm.states[k * STATE_SIZE + STATE.rMax]!);
    expectPrinted(shape, '1.01471700');
    expectPrinted((storm.states[k * STATE_SIZE + STATE.vortexWind]! * shape) / wind.seaWindMs, '0.08695805');
    expect(siteSeries(storm, asSite(workedSites[0]!)).timeS).toHaveLength(557);
    expect(siteSeries(storm, asSite(workedSites[4]!)).timeS).toHaveLength(289);
  });
  it.each([
    [
      0,
      '61.416515',
      '43200',
      '63.398013',
      '62.381009',
      '63.115409',
      '64.843840',
      '65.804863',
      '66.440135',
      '86125.26',
      '103107.00',
      '72627.79',
      '88287.80',
    ],
    [
      1,
      '54.854776',
      '55020',
      '56.165036',
      '55.474103',
      '55.935145',
      '57.196463',
      '57.762334',
      '58.326361',
      '42145.05',
      '49586.12',
      '33839.31',
      '40209.92',
    ],
    [
      2,
      '44.787471',
      '51660',
      '45.894449',
      '45.284276',
      '45.671011',
      '46.802288',
      '47.328701',
      '47.779834',
      '7527.78',
      '9719.41',
      '5733.11',
      '7432.87',
    ],
    [
      3,
      '46.694467',
      '70860',
      '46.703184',
      '46.649360',
      '46.689950',
      '46.756939',
      '46.791454',
      '46.847611',
      '22863.14',
      '22904.44',
      '16444.07',
      '16474.43',
    ],
    [
      4,
      '23.910312',
      '71400',
      '23.910312',
      '23.910312',
      '23.910312',
      '23.910312',
      '23.910312',
      '23.910312',
      '0',
      '0',
      '0',
      '0',
    ],
  ])(
    'scores site %i',
    (
      site,
      plainGust,
      plainTimeS,
      enhancedMean,
      p5,
      p50,
      p90,
      p95,
      p99,
      groundUpPlain,
      groundUpMean,
      grossPlain,
      grossMean,
    ) => {
      expectColumns(scores, site, {
        plainGust,
        plainTimeS,
        enhancedMean,
        p5,
        p50,
        p90,
        p95,
        p99,
        groundUpPlain,
        groundUpMean,
        grossPlain,
        grossMean,
      });
    },
  );
  it('adds up the event by draws', () => {
    const event = eventSummary(scores.eventGross);
    expectPrinted(sum(scores.grossPlain), '128644.28');
    // Each site's loss per draw is rounded to 1/1024 before it is added, so the last printed digit may move by one.
    expect(event.mean).toBeCloseTo(152405.02, 1);
    expect(event.p5).toBeCloseTo(139601.48, 1);
    expect(event.p50).toBeCloseTo(148173.09, 1);
    expect(event.p95).toBeCloseTo(184540.43, 1);
  });
  it('gives the southern mirror of S2 the same numbers', () => {
    const south = prepareStorm(mirroredFixes(workedFixes), DEFAULT_OPTIONS, null);
    const mirror = scoresOf(south, [mirroredSite(workedSites[1]!)]);
    for (const column of ['plainGust', 'enhancedMean', 'p5', 'p50', 'p99', 'secondsAbove25'] as const) {
      expect(Math.abs(mirror[column][0]! - scores[column][1]!)).toBeLessThan(
        1e-8 * (column === 'secondsAbove25' ? 1e4 : 1e-4),
      );
    }
    expect(mirror.plainDirection[0]).toBeCloseTo(180 - scores.plainDirection[1]!, 9);
  });
});

describe('the worked storm, intensity from wind, anchor mean', () => {
  const storm = stormOf({ intensity: 'wind', anchor: 'mean' });
  const scores = scoresOf(storm);

  it('resolves every fix', () => {
    const expected = {
      axisymmetricMaxWindMs: ['46.591525', '48.430805', '49.109698', '41.747157', '29.541312'],
      amplitude: ['0.10039848', '0.11398497', '0.11899984', '0.06461389', '0'],
      patternRadPerS: ['7.01811265e-4', '7.67912078e-4', '8.21936314e-4', '6.28840236e-4', '3.70818968e-4'],
    } as const;
    for (const [field, values] of Object.entries(expected)) {
      values.forEach((printed, i) => expectPrinted(storm.fixes[i]![field as 'amplitude'], printed));
    }
    expectPrinted(storm.states[stateAt(storm, 43_200) * STATE_SIZE + STATE.patternAngle]!, '33.0433747');
  });
  it.each([
    [
      0,
      '65.842954',
      '43200',
      '68.550229',
      '67.148111',
      '68.127645',
      '70.556168',
      '72.752038',
      '125722.67',
      '153792.86',
      '109456.21',
      '136311.59',
    ],
    [
      1,
      '57.733000',
      '54720',
      '59.479655',
      '58.552898',
      '59.156653',
      '60.862944',
      '62.332854',
      '59218.35',
      '71443.03',
      '48561.00',
      '59407.91',
    ],
    [
      2,
      '47.803725',
      '51720',
      '49.307212',
      '48.493477',
      '49.022105',
      '50.517534',
      '51.820796',
      '14212.15',
      '18748.11',
      '10948.11',
      '14558.41',
    ],
    [
      3,
      '47.491153',
      '70680',
      '47.502286',
      '47.433987',
      '47.481891',
      '47.568813',
      '47.681262',
      '26777.42',
      '26836.00',
      '19328.16',
      '19371.53',
    ],
    [4, '24.029803', '71400', '24.029803', '24.029803', '24.029803', '24.029803', '24.029803', '0', '0', '0', '0'],
  ])(
    'scores site %i',
    (
      site,
      plainGust,
      plainTimeS,
      enhancedMean,
      p5,
      p50,
      p90,
      p99,
      groundUpPlain,
      groundUpMean,
      grossPlain,
      grossMean,
    ) => {
      expectColumns(scores, site, {
        plainGust,
        plainTimeS,
        enhancedMean,
        p5,
        p50,
        p90,
        p99,
        groundUpPlain,
        groundUpMean,
        grossPlain,
        grossMean,
      });
    },
  );
  it('adds up the event by draws', () => {
    const event = eventSummary(scores.eventGross);
    expectPrinted(sum(scores.grossPlain), '188293.48');
    expect(event.mean).toBeCloseTo(229649.44, 1);
    expect(event.p5).toBeCloseTo(207805.76, 1);
    expect(event.p50).toBeCloseTo(223550.6, 1);
    expect(event.p95).toBeCloseTo(284940.7, 1);
  });
});

describe('the worked storm, intensity from wind, anchor auto', () => {
  const storm = stormOf({ intensity: 'wind' });
  const scores = scoresOf(storm);

  it('divides the maxima, which may already hold vortex peaks', () => {
    expect(storm.fixes.map(({ anchor }) => anchor)).toEqual(new Array(5).fill('peak'));
    ['48.143209', '49.818578', '50.683084', '45.720152', '34'].forEach((printed, i) =>
      expectPrinted(storm.fixes[i]!.anchoredMaxWindMs, printed),
    );
    expect(storm.fixes.map(({ maxWindMs }) => maxWindMs)).toEqual([50, 52, 53, 46, 34]);
    expect(storm.notices.find(({ code }) => code === 'anchor')?.text).toContain('peak');
  });
  it('scores the sites', () => {
    ['62.958769', '56.299452', '46.147146', '47.255801', '23.993810'].forEach((printed, i) =>
      expectPrinted(scores.plainGust[i]!, printed),
    );
    ['65.220639', '57.716781', '47.376766', '47.245360', '23.993810'].forEach((printed, i) =>
      expectPrinted(scores.p50[i]!, printed),
    );
    const event = eventSummary(scores.eventGross);
    expectPrinted(sum(scores.grossPlain), '151537.74');
    expect(event.mean).toBeCloseTo(186959.18, 1);
    expect(event.p95).toBeCloseTo(234621.05, 1);
  });
});

describe('the plain pipeline on the 300-s grid, intensity from wind', () => {
  const storm = stormOf({ intensity: 'wind', anchor: 'mean', mesovortices: false, innerTimeStepS: 300 });
  const scores = scoresOf(storm);
  const columns: [string, (site: number) => number, string[]][] = [
    ['plainTimeS', (i) => scores.plainTimeS[i]!, ['43200', '54600', '51600', '70800', '71400']],
    ['plainGust', (i) => scores.plainGust[i]!, ['65.842954', '57.729482', '47.802158', '47.484852', '24.029803']],
    ['plainSeaWind', (i) => scores.plainSeaWind[i]!, ['50.330973', '46.544313', '39.752902', '38.956412', '22.388861']],
    [
      'plainDirection',
      (i) => scores.plainDirection[i]!,
      ['161.316055', '151.433138', '16.870390', '130.379350', '6.987471'],
    ],
    ['plainMean', (i) => scores.plainMean[i]!, ['50.330973', '41.424488', '33.353775', '23.180567', '15.538811']],
    ['secondsAbove25', (i) => scores.secondsAbove25[i]!, ['48949.98', '41398.73', '36663.81', '31272.24', '0']],
    ['secondsAbove33', (i) => scores.secondsAbove33[i]!, ['36080.98', '30360.18', '25771.07', '24498.35', '0']],
    ['damagePlain', (i) => scores.damagePlain[i]!, ['0.12572267', '0.05919537', '0.01420794', '0.01337244', '0']],
    ['groundUpPlain', (i) => scores.groundUpPlain[i]!, ['125722.67', '59195.37', '14207.94', '26744.87', '0']],
  ];
  it.each(columns)('%s', (_, value, printed) => {
    printed.forEach((text, i) => expectPrinted(value(i), text));
  });
  it('shows the same steps when it explains a site', () => {
    const rows: [keyof ReturnType<typeof windAt>, string[]][] = [
      ['distanceM', ['35470.188', '37324.265', '43258.174', '40833.749', '102399.286']],
      ['bearingDeg', ['89.927985', '78.980101', '308.967903', '54.882724', '301.024735']],
      ['gradientMs', ['54.574421', '50.294423', '50.643638', '42.474323', '31.071979']],
      ['surfaceMs', ['46.778075', '43.109505', '43.408833', '36.406563', '26.615374']],
      ['inflowDeg', ['19.852830', '19.793539', '23.796122', '19.671151', '25.000000']],
      ['eastwardMs', ['-16.123404', '-22.256745', '-11.536597', '-29.675898', '-2.723656']],
      ['northwardMs', ['47.678535', '40.877994', '-38.042084', '25.237732', '-22.222574']],
      ['seaWindMs', ['50.330973', '46.544313', '39.752902', '38.956412', '22.388861']],
      ['landWeight', ['0', '0.683340', '1', '1', '1']],
      ['meanMs', ['50.330973', '41.424488', '33.353775', '23.180567', '15.538811']],
      ['turbulence', ['0.122474', '0.156415', '0.172142', '0.285180', '0.217147']],
      ['gustFactor', ['1.308200', '1.393608', '1.433186', '1.717638', '1.546438']],
    ];
    workedSites.forEach((site, i) => {
      const wind = windAt(storm, stateAt(storm, scores.plainTimeS[i]!), asSite(site));
      for (const [step, printed] of rows) expectPrinted(wind[step], printed[i]!);
      expect(wind.gustMs).toBeCloseTo(scores.plainGust[i]!, 8);
    });
  });
  it('has the storm of the page at the peaks', () => {
    const rows: [number, string[]][] = [
      [STATE.latitude, ['24.300000', '24.986280', '24.805716', '25.989138', '26.028041']],
      [STATE.longitude, ['179.950000', '-179.813685', '-179.876126', '-179.434778', '-179.418196']],
      [STATE.speed, ['6.736453', '7.014125', '7.014125', '7.720672', '7.720672']],
      [STATE.heading, ['17.183874', '17.412690', '17.386557', '20.935090', '20.942317']],
      [STATE.rMax, ['36000.000', '38111.111', '37555.556', '42222.222', '42444.444']],
      [STATE.b, ['1.560682', '1.486148', '1.502800', '1.331573', '1.324370']],
      [STATE.deficit, ['6200.000', '5566.667', '5733.333', '4500.000', '4450.000']],
    ];
    for (const [offset, printed] of rows) {
      printed.forEach((text, i) =>
        expectPrinted(storm.states[stateAt(storm, scores.plainTimeS[i]!) * STATE_SIZE + offset]!, text),
      );
    }
  });
  it('veers at S2 as the storm passes on its left', () => {
    const rows = [
      [12, '29.930486', '107.797854', '0.884539', '36.417718'],
      [15, '46.430345', '145.329036', '0.692525', '57.539814'],
      [18, '38.484900', '226.371947', '0.716969', '47.586048'],
    ] as const;
    for (const [hour, sea, direction, weight, gust] of rows) {
      const wind = windAt(storm, stateAt(storm, hour * 3600), asSite(workedSites[1]!));
      expectPrinted(wind.seaWindMs, sea);
      expectPrinted(wind.directionDeg, direction);
      expectPrinted(wind.landWeight, weight);
      expectPrinted(wind.gustMs, gust);
    }
  });
});

it('has a crest of 1, a trough of -0.5 and no mean around the ring', () => {
  expect(azimuthalShape(0)).toBe(1);
  expect(azimuthalShape((2 * Math.PI) / 3)).toBeCloseTo(-0.5, 12);
});
