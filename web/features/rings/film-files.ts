import { NOTICE_VERSION } from '#contract/notices.ts';
import { SIDE_IN_RADII, type FilmFrame, type FilmOrder } from './film.ts';

export const RING_NOTE =
  'A two-dimensional picture for study. Real eyewalls differ; where small vortices pass can’t be known ahead. Not a forecast or a warning.';

const NUMBERS = [
  ['time_s', 'timeS'],
  ['strongest_wind_m_per_s', 'maxWindMs'],
  ['ring_mean_wind_m_per_s', 'meanMaxWindMs'],
  ['radius_of_mean_maximum_m', 'radiusOfMeanMaxM'],
  ['lowest_pressure_pa', 'minPressurePa'],
  ['vortices', 'vortices'],
  ['energy_share', 'energyShare'],
  ['enstrophy_share', 'enstrophyShare'],
  ['circulation_change', 'circulationResidual'],
] as const;

/** The frames' numbers, a line a frame, each with the version of the cautions. */
export const framesCsv = (frames: readonly FilmFrame[]): string =>
  [
    [...NUMBERS.map(([name]) => name), 'notice_version'].join(','),
    ...frames.map((frame) => [...NUMBERS.map(([, key]) => String(frame[key])), NOTICE_VERSION].join(',')),
  ].join('\r\n');

/** The frames with their vorticity and all that says what they are. */
export const framesJson = (order: FilmOrder, frames: readonly FilmFrame[]): string =>
  JSON.stringify({
    what: 'Breakdown of an eyewall ring in a two-dimensional model',
    note: RING_NOTE,
    noticeVersion: NOTICE_VERSION,
    setup: { ...order, sideM: SIDE_IN_RADII * order.radiusOfMaxWindM },
    vorticityLayout: 'rows of equal y from the bottom up, anticlockwise flow, per second',
    frames: frames.map(({ vorticity, ...numbers }) => ({ ...numbers, vorticityPerS: [...vorticity] })),
  });

const MARGIN = 12;
const FONT_PX = 13;

/** The picture on screen as a file, with its caption and the standing note under it. */
export const framePng = (picture: HTMLCanvasElement, caption: string, use: (file: Blob) => void): void => {
  const sheet = document.createElement('canvas');
  sheet.width = picture.width;
  sheet.height = picture.height + 2 * MARGIN + 5 * (FONT_PX + 4);
  const context = sheet.getContext('2d');
  if (!context) return;
  context.fillStyle = '#FFFDFA';
  context.fillRect(0, 0, sheet.width, sheet.height);
  context.drawImage(picture, 0, 0);
  context.fillStyle = '#14262E';
  context.font = `${FONT_PX}px Lato, system-ui, sans-serif`;
  let y = picture.height + MARGIN + FONT_PX;
  for (const text of [caption, RING_NOTE]) {
    let line = '';
    for (const word of text.split(' ')) {
      const longer = line === '' ? word : `${line} ${word}`;
      if (context.measureText(longer).width > sheet.width - 2 * MARGIN) {
        context.fillText(line, MARGIN, y);
        y += FONT_PX + 4;
        line = word;
      } else line = longer;
    }
    context.fillText(line, MARGIN, y);
    y += FONT_PX + 4;
  }
  sheet.toBlob((file) => {
    if (file) use(file);
  }, 'image/png');
};
