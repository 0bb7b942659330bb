/** Wind over open sea on a square about the centre: rows from north to south, points from west to east. */
export interface FieldGrid {
  halfWidthM: number;
  /** Along one side. */
  points: number;
  seaWindMs: readonly number[];
  /** Where the wind comes from. */
  directionDeg: readonly number[];
  gustMs: readonly number[];
}

/** A place relative to the centre of the storm. */
export interface FieldPlace {
  eastM: number;
  northM: number;
}

export interface FieldWind {
  seaWindMs: number;
  directionDeg: number;
  gustMs: number;
}

const RAD = Math.PI / 180;
const turn = (degrees: number) => ((degrees % 360) + 360) % 360;

export const distanceOf = ({ eastM, northM }: FieldPlace): number => Math.hypot(eastM, northM);
/** Clockwise from north, from the centre to the place. */
export const bearingOf = ({ eastM, northM }: FieldPlace): number => turn(Math.atan2(eastM, northM) / RAD);

/** Held inside the picture. */
export const insideField = (grid: Pick<FieldGrid, 'halfWidthM'>, { eastM, northM }: FieldPlace): FieldPlace => {
  const hold = (metres: number) => Math.min(grid.halfWidthM, Math.max(-grid.halfWidthM, metres));
  return { eastM: hold(eastM), northM: hold(northM) };
};

/** Between the four points around a place; the direction through its components, so that 350 and 10 make 0. */
export const windAt = (grid: FieldGrid, place: FieldPlace): FieldWind => {
  const { halfWidthM, points } = grid;
  const { eastM, northM } = insideField(grid, place);
  const scale = (points - 1) / (2 * halfWidthM);
  const column = (eastM + halfWidthM) * scale;
  const row = (halfWidthM - northM) * scale;
  const [left, top] = [Math.min(points - 2, Math.floor(column)), Math.min(points - 2, Math.floor(row))];
  const [x, y] = [column - left, row - top];
  const corners = [
    { index: top * points + left, weight: (1 - x) * (1 - y) },
    { index: top * points + left + 1, weight: x * (1 - y) },
    { index: (top + 1) * points + left, weight: (1 - x) * y },
    { index: (top + 1) * points + left + 1, weight: x * y },
  ];
  const sum = (value: (index: number) => number) =>
    corners.reduce((total, { index, weight }) => total + weight * value(index), 0);
  const from = (index: number) => grid.directionDeg[index]! * RAD;
  const east = sum((index) => grid.seaWindMs[index]! * Math.sin(from(index)));
  const north = sum((index) => grid.seaWindMs[index]! * Math.cos(from(index)));
  return {
    seaWindMs: sum((index) => grid.seaWindMs[index]!),
    directionDeg: turn(Math.atan2(east, north) / RAD),
    gustMs: sum((index) => grid.gustMs[index]!),
  };
};

/** Where the strongest gust of the picture is. */
export const strongestPlace = ({ halfWidthM, points, gustMs }: FieldGrid): FieldPlace => {
  const best = gustMs.reduce((most, gust, index) => (gust > gustMs[most]! ? index : most), 0);
  const step = (2 * halfWidthM) / (points - 1);
  return { eastM: (best % points) * step - halfWidthM, northM: halfWidthM - Math.floor(best / points) * step };
};

/** "right", "left", "ahead" or "astern" of the motion, by quarters. */
export const sideOf = (place: FieldPlace, headingDeg: number): string => {
  const angle = turn(bearingOf(place) - headingDeg);
  if (angle < 45 || angle >= 315) return 'ahead';
  if (angle < 135) return 'right';
  return angle < 225 ? 'astern' : 'left';
};
