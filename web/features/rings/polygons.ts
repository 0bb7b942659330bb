const NAMES = ['shift', 'ellipse', 'triangle', 'square', 'pentagon', 'hexagon', 'heptagon', 'octagon'];

/** What people call the shape a wave gives a ring; a wave of one moves it. */
export const polygonOf = (m: number): string => NAMES[m - 1] ?? `${m}-sided polygon`;
