import { Download } from 'lucide-react';
import { Button } from '../../../ui/button.tsx';
import { saveText } from '../../../ui/charts/chart-frame.tsx';
import { filmTime, type FilmFrame, type FilmOrder } from '../film.ts';
import { framePng, framesCsv, framesJson } from '../film-files.ts';

interface ExportCardProps {
  order: FilmOrder;
  frames: readonly FilmFrame[];
  index: number;
  canvasId: string;
}

const savePicture = (file: Blob) => {
  const url = URL.createObjectURL(file);
  const link = document.createElement('a');
  link.href = url;
  link.download = 'ring-frame.png';
  link.click();
  URL.revokeObjectURL(url);
};

/** The film as files, each with the caution it was made under. */
export function ExportCard({ order, frames, index, canvasId }: ExportCardProps) {
  const none = frames.length > 1 ? undefined : 'after the film is computed';
  const frame = frames[Math.min(index, frames.length - 1)];
  const caption = frame
    ? `Vorticity ${filmTime(frame.timeS)} after the start; ring of ${order.maxWindMs} m/s at ${order.radiusOfMaxWindM / 1000} km, width ${order.ringWidthFraction}, eye ratio ${order.eyeVorticityRatio}, ${order.points} × ${order.points} points.`
    : '';
  return (
    <section
      aria-label="Export"
      className="flex flex-wrap items-start gap-2 rounded-3 border border-rule bg-sheet px-4 py-3 shadow-1"
    >
      <h2 className="mr-2 pt-1 text-15">Export</h2>
      <Button
        size="small"
        icon={Download}
        disabledReason={none}
        onClick={() => saveText('ring-breakdown.csv', framesCsv(frames), 'text/csv;charset=utf-8')}
      >
        Numbers, CSV
      </Button>
      <Button
        size="small"
        icon={Download}
        disabledReason={none}
        onClick={() => saveText('ring-breakdown.json', framesJson(order, frames), 'application/json')}
      >
        Frames, JSON
      </Button>
      <Button
        size="small"
        icon={Download}
        disabledReason={frame ? undefined : 'after the first frame'}
        onClick={() => {
          const picture = document.getElementById(canvasId)?.querySelector('canvas');
          if (picture) framePng(picture, caption, savePicture);
        }}
      >
        This frame, PNG
      </Button>
    </section>
  );
}
