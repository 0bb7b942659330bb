const POINTS = ['N', 'NNE', 'NE', 'ENE', 'E', 'ESE', 'SE', 'SSE', 'S', 'SSW', 'SW', 'WSW', 'W', 'WNW', 'NW', 'NNW'];

/** "SSE 151°" for a direction the wind comes from. */
export const compass = (directionDeg: number): string => {
  const degrees = ((Math.round(directionDeg) % 360) + 360) % 360;
  return `${POINTS[Math.round(degrees / 22.5) % 16]} ${degrees}°`;
};
