import { describe, expect, it } from 'vitest';
import { msFromKnots } from '#engine/units.ts';
import { motionWind } from '#engine/winds/asymmetry.ts';
import { coriolis } from '#engine/winds/coriolis.ts';
import { hollandGradientWind, hollandPressure } from '#engine/winds/holland-1980.ts';
import { fittedB, vickeryWadheraB } from '#engine/winds/holland-b.ts';
import { inflowAngle } from '#engine/winds/inflow.ts';
import { vickeryWadheraRadius } from '#engine/winds/radius-of-maximum-wind.ts';
import { surfaceFactor } from '#engine/winds/surface-factor.ts';
import { fitVortex } from '#engine/winds/vortex-fit.ts';
import { centralPressure } from '#engine/winds/wind-pressure.ts';
import { expectPrinted } from '../helpers/printed.ts';

const f = coriolis(25);
const vortex = { rMax: 40_000, b: 1.5, deficit: 6000, f };

describe('Holland (1980) vortex, computed from the published formula', () => {
  it.each([
    [10, '4.285062', '950.0201'],
    [40, '52.438286', '972.0728'],
    [100, '36.247890', '996.5889'],
    [300, '11.929982', '1007.1488'],
  ])('has its wind and pressure at %i km', (km, wind, pressure) => {
    expectPrinted(hollandGradientWind(km * 1000, vortex), wind);
    expectPrinted(hollandPressure(km * 1000, 95_000, vortex) / 100, pressure);
  });
  it('has its cyclostrophic peak without the earth’s rotation', () => {
    expectPrinted(hollandGradientWind(40_000, { ...vortex, f: 0 }), '53.656840');
  });
  it('is calm at the centre and refuses an impossible vortex', () => {
    expect(hollandGradientWind(0, vortex)).toBe(0);
    expect(hollandGradientWind(NaN, vortex)).toBeNaN();
    expect(() => hollandGradientWind(1, { ...vortex, rMax: 0 })).toThrow('rMax');
    expect(() => hollandGradientWind(1, { ...vortex, deficit: NaN })).toThrow('deficit');
    expect(() => hollandPressure(1, 95_000, { ...vortex, b: -1 })).toThrow('b is');
  });
});

describe('parameters, computed from the published formula', () => {
  it('fits B to a wind', () => {
    expectPrinted(fittedB(50, 40_000, f, 6000), '1.366735');
    const fitted = fitVortex(53, 6.736453, 36_000, coriolis(24.3), 6200);
    expectPrinted(fitted.b, '1.560682');
    expect(hollandGradientWind(36_000, fitted)).toBeCloseTo(fitted.gradientMax, 10);
  });
  it('keeps the wind when B is clamped, by changing the pressure deficit', () => {
    for (const wind of [25, 90]) {
      const fitted = fitVortex(wind, 5, 40_000, f, 6000);
      expect([0.8, 2.5]).toContain(fitted.b);
      expect(hollandGradientWind(40_000, fitted)).toBeCloseTo(fitted.gradientMax, 10);
    }
  });
  it('has B and radius of Vickery & Wadhera (2008)', () => {
    expectPrinted(vickeryWadheraB(40_000, f, 6000, 95_000), '1.524696');
    expectPrinted(vickeryWadheraRadius(6000, 25) / 1000, '37.75145');
  });
  it('has the pressure of Knaff & Zehr (2007) and Courtney & Knaff (2009), and names the branch', () => {
    const wind = msFromKnots(100);
    const speed = msFromKnots(10);
    expectPrinted(centralPressure(wind, speed, 25, 101_000).pressure / 100, '948.5211');
    expectPrinted(centralPressure(wind, speed, 15, 101_000).pressure / 100, '957.8943');
    expectPrinted(centralPressure(wind, speed, 18, 101_000).pressure / 100, '951.902');
    expectPrinted(centralPressure(wind, speed, 17.999999, 101_000).pressure / 100, '957.894');
    expect(centralPressure(wind, speed, 17, 101_000).relation).toContain('Courtney');
    expect(centralPressure(wind, speed, -18, 101_000).relation).toContain('Knaff & Zehr');
  });
});

describe('surface wind, computed from the published formula', () => {
  it('tapers from the eyewall outward', () => {
    expectPrinted(surfaceFactor(100_000), '0.857143');
    expectPrinted(surfaceFactor(700_000), '0.714286');
    expect(surfaceFactor(400_000)).toBeCloseTo((0.9 + 0.75) / 2 / 1.05, 12);
  });
  it('turns inwards by 10 to 25 degrees, without a jump', () => {
    const angles = [10, 15, 20, 22.5, 25, 25];
    [0, 0.5, 1, 1.1, 1.2, 2.5].forEach((x, i) => expect(inflowAngle(x)).toBeCloseTo(angles[i]!, 12));
    expect(inflowAngle(NaN)).toBeNaN();
    for (const x of [1, 1.2]) expect(inflowAngle(x - 1e-9)).toBeCloseTo(inflowAngle(x), 6);
  });
  it('adds 0.55 of the motion, turned cyclonically', () => {
    const north = motionWind(10, 0, 1);
    expectPrinted(north.u, '-1.881111');
    expectPrinted(north.v, '5.168309');
    const south = motionWind(10, 180, -1);
    expect(south.u).toBeCloseTo(north.u, 12);
    expect(south.v).toBeCloseTo(-north.v, 12);
  });
});
