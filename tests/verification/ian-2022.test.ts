import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { EvaluationRequest } from '#contract/evaluations.ts';
import { landIndex } from '../../api/compute/land.ts';
import { EvaluationService } from '../../api/features/evaluations/evaluation-service.ts';
import { readBestTrack } from '../../api/features/scenarios/reading/best-track.ts';

// Peak gusts of Ian (2022) at places whose peak was recorded, roughness from the stated exposure. Preliminary reports of
// the US National Weather Service and National Hurricane Center as reproduced by news pages; coordinates from memory or
// town centres; most heights and averaging periods are not stated. Good for a coarse check only.
const PEAKS: readonly (readonly [string, number, number, number, number])[] = [
  ['3 mi SE Cape Coral', 26.6, -81.91, 0.3, 62.6],
  ['Southwest Florida International Airport', 26.536, -81.755, 0.03, 49.2],
  ['Tarpon Point', 26.54, -82.0, 0.03, 48.7],
  ['Fort Myers', 26.587, -81.863, 0.3, 44.7],
  ['Cape Coral Fire Department', 26.57, -81.95, 0.3, 39.3],
  ['2.4 mi E Estero', 26.43, -81.77, 0.3, 38.0],
  ['Punta Gorda Airport', 26.919, -81.991, 0.03, 60.4],
  ['Punta Gorda', 26.93, -82.05, 0.1, 55.4],
  ['Grove City', 26.91, -82.33, 0.03, 49.2],
  ['near Port Charlotte', 26.98, -82.09, 0.1, 59.0],
];

const text = readFileSync(new URL('../data/tracks/AL092022_IAN.txt', import.meta.url), 'utf8');
const track = readBestTrack(text).fixes.map((fix) => ({ ...fix, windAveragingSeconds: 60 }));
const service = new EvaluationService(landIndex, () => 'test');

const errorsWith = (intensity: 'pressure' | 'wind'): { bias: number; error: number } => {
  const sites = PEAKS.map(([siteRef, latitude, longitude, roughnessLengthM]) => ({
    siteRef,
    latitude,
    longitude,
    roughnessLengthM,
  }));
  const reply = service.evaluate(EvaluationRequest.parse({ track, sites, options: { intensity } }));
  const relative = reply.sites.map(({ plain }, i) => plain!.gustMs / PEAKS[i]![4] - 1);
  const mean = (values: number[]) => values.reduce((a, b) => a + b, 0) / values.length;
  return { bias: mean(relative), error: mean(relative.map(Math.abs)) };
};

it('Ian (2022) by its pressure is within a fifth of the recorded peak gusts on the whole, and nearer than by its reported wind', () => {
  const pressure = errorsWith('pressure');
  const wind = errorsWith('wind');
  // Measured when this was written: by pressure +11 % on average, 18 % off either way; by wind +42 % and 42 %. The bounds
  // only notice change, they aren't an aim.
  expect(Math.abs(pressure.bias)).toBeLessThan(0.15);
  expect(pressure.error).toBeLessThan(0.25);
  // A best-track wind is the largest 1-min wind anywhere; matched to the whole ring it over-predicts.
  expect(wind.bias).toBeGreaterThan(pressure.bias + 0.1);
  expect(wind.error).toBeGreaterThan(pressure.error);
});
