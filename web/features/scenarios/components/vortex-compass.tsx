const CENTRE = 60;
const RING = 36;
const MARK = 5;

interface VortexCompassProps {
  /** Bearings of the marks [deg]. */
  bearings: readonly number[];
  uncertaintyDeg: number;
}

const at = (bearing: number, radius: number) => ({
  x: CENTRE + radius * Math.sin((bearing * Math.PI) / 180),
  y: CENTRE - radius * Math.cos((bearing * Math.PI) / 180),
});

const arc = (bearing: number, half: number): string => {
  const from = at(bearing - half, RING);
  const to = at(bearing + half, RING);
  return `M ${from.x} ${from.y} A ${RING} ${RING} 0 0 1 ${to.x} ${to.y}`;
};

/** The ring around the eye with a mark at each bearing and its uncertainty along the ring. */
export function VortexCompass({ bearings, uncertaintyDeg }: VortexCompassProps) {
  const told = bearings.map((bearing) => `${((bearing % 360) + 360) % 360}°`).join(', ');
  return (
    <svg
      viewBox="0 0 120 120"
      className="size-30 flex-none"
      role="img"
      aria-label={bearings.length === 0 ? 'Compass: no marks yet' : `Compass with marks at ${told}`}
    >
      <circle cx={CENTRE} cy={CENTRE} r={RING} className="fill-none stroke-edge" strokeWidth={1.5} />
      <circle cx={CENTRE} cy={CENTRE} r={1.5} className="fill-ink-2" />
      {['N', 'E', 'S', 'W'].map((letter, k) => {
        const { x, y } = at(90 * k, RING + 15);
        return (
          <text
            key={letter}
            x={x}
            y={y}
            className="fill-ink-2 text-12"
            textAnchor="middle"
            dominantBaseline="central"
            aria-hidden
          >
            {letter}
          </text>
        );
      })}
      {bearings.map((bearing, k) => (
        <path
          key={`${k} arc`}
          d={arc(bearing, uncertaintyDeg)}
          className="fill-none stroke-verdigris opacity-35"
          strokeWidth={2 * MARK}
        />
      ))}
      {bearings.map((bearing, k) => {
        const { x, y } = at(bearing, RING);
        return <circle key={k} cx={x} cy={y} r={MARK} className="fill-verdigris stroke-sheet" strokeWidth={1.5} />;
      })}
    </svg>
  );
}
