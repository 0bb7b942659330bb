import { distanceToLandM, isLand, type LandIndex } from '#engine/geo/land.ts';

/** Metres from a point to the nearest land, 0 on land; the land polygons are loaded when first asked. */
export const offshoreFrom =
  (land: () => LandIndex) =>
  (latitude: number, longitude: number): number =>
    isLand(land(), latitude, longitude) ? 0 : distanceToLandM(land(), latitude, longitude);
