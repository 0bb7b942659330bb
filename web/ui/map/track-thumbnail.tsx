import { classNames } from '../../lib/class-names.ts';
import { boundsOf, longitudeNear, padBounds, type LonLat } from './geography.ts';
import { useCoarseLand, type LandPolygons } from './land.ts';

interface TrackThumbnailProps {
  /** One or several tracks; the first is drawn solid. */
  paths: readonly (readonly LonLat[])[];
  label: string;
  width: number;
  height: number;
  className?: string;
}

/** A tiny picture of a track over land, without a map engine. */
export function TrackThumbnail({ paths, label, width, height, className }: TrackThumbnailProps) {
  const land = useCoarseLand();
  const around = boundsOf(paths.flat());
  if (!around) return null;
  const padded = padBounds(around, 0.25, 1.5);
  const midLatitude = (padded[1] + padded[3]) / 2;
  const squeeze = Math.max(0.2, Math.cos((midLatitude * Math.PI) / 180));
  const spanX = (padded[2] - padded[0]) * squeeze;
  const spanY = padded[3] - padded[1];
  const scale = Math.min(width / spanX, height / spanY);
  const centreX = (padded[0] + padded[2]) / 2;
  const project = ([longitude, latitude]: LonLat): [number, number] => [
    width / 2 + (longitude - centreX) * squeeze * scale,
    height / 2 - (latitude - midLatitude) * scale,
  ];
  return (
    <svg
      role="img"
      aria-label={label}
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      className={classNames('block rounded-2 border border-rule bg-map-sea', className)}
    >
      {land && (
        <path
          d={landPath(land, centreX, project, width, height)}
          fill="var(--map-land)"
          stroke="var(--map-coast)"
          strokeWidth={0.6}
        />
      )}
      {paths.map((path, index) => (
        <g key={index} fill="none" strokeLinecap="round" strokeLinejoin="round">
          <path d={linePath(path, project)} stroke="var(--map-halo)" strokeWidth={3.4} strokeOpacity={0.8} />
          <path
            d={linePath(path, project)}
            stroke={index === 0 ? 'var(--map-track)' : 'var(--thread)'}
            strokeWidth={1.6}
            strokeDasharray={index === 0 ? undefined : '4 3'}
          />
          <TrackEnd path={path} project={project} />
        </g>
      ))}
    </svg>
  );
}

type Project = (point: LonLat) => [number, number];

const linePath = (points: readonly LonLat[], project: Project) =>
  `M${points
    .map((point) =>
      project(point)
        .map((value) => value.toFixed(1))
        .join(' '),
    )
    .join('L')}`;

/** A small open arrow head at the last point, the way the storm goes. */
function TrackEnd({ path, project }: { path: readonly LonLat[]; project: Project }) {
  const last = path.at(-1);
  const before = path.at(-Math.min(path.length, 4));
  if (!last || !before) return null;
  const [x, y] = project(last);
  const [fromX, fromY] = project(before);
  const angle = (Math.atan2(y - fromY, x - fromX) * 180) / Math.PI;
  return (
    <path
      d="M-4 -3L0 0L-4 3"
      transform={`translate(${x.toFixed(1)} ${y.toFixed(1)}) rotate(${angle.toFixed(0)})`}
      stroke="var(--map-track)"
      strokeWidth={1.6}
    />
  );
}

/** Land near the picture only; each land mass is moved to the side of the date line the picture looks at. */
const landPath = (land: LandPolygons, centre: number, project: Project, width: number, height: number): string => {
  const parts: string[] = [];
  for (const polygon of land) {
    const outer = polygon[0];
    const anchor = outer?.[0]?.[0];
    if (!outer || anchor === undefined) continue;
    const middle = (Math.min(...outer.map((point) => point[0]!)) + Math.max(...outer.map((point) => point[0]!))) / 2;
    const shift = longitudeNear(middle, centre) - middle;
    for (const ring of polygon) {
      const points = ring.map(([longitude = 0, latitude = 0]) => project([longitude + shift, latitude]));
      const seen =
        points.some(([x]) => x >= 0) &&
        points.some(([x]) => x <= width) &&
        points.some(([, y]) => y >= 0) &&
        points.some(([, y]) => y <= height);
      if (seen) parts.push(`M${points.map(([x, y]) => `${x.toFixed(1)} ${y.toFixed(1)}`).join('L')}Z`);
    }
  }
  return parts.join('');
};
