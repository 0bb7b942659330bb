import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { expect, it } from 'vitest';
import { landPolygons } from '../../web/ui/map/land.ts';

const atlas = (name: string) =>
  JSON.parse(readFileSync(createRequire(import.meta.url).resolve(`world-atlas/${name}`), 'utf8')) as Parameters<
    typeof landPolygons
  >[0];
const longitudes = (ring: readonly (readonly number[])[]) => ring.map(([longitude = NaN]) => longitude);

it.each(['land-110m.json', 'land-50m.json'])('%s runs on without jumps, and every lake lies in its land', (name) => {
  for (const [land = [], ...lakes] of landPolygons(atlas(name))) {
    const outer = longitudes(land);
    const polar = land.some(([, latitude]) => Math.abs(latitude ?? 0) === 90);
    for (let index = 1; index < outer.length && !polar; index += 1)
      expect(Math.abs(outer[index]! - outer[index - 1]!)).toBeLessThanOrEqual(180);
    for (const lake of lakes) {
      expect(Math.min(...longitudes(lake))).toBeGreaterThanOrEqual(Math.min(...outer));
      expect(Math.max(...longitudes(lake))).toBeLessThanOrEqual(Math.max(...outer));
    }
  }
});
