import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { landIndex } from '../compute/land.ts';
import { readObservations } from './hindcast/observations.ts';
import { hindcastReport } from './hindcast/report.ts';
import { readTracks } from './hindcast/tracks.ts';

// npm run hindcast: past storms against observed gusts; writes what the page Validation shows.
const data = new URL('../../tests/data/', import.meta.url);
const published = fileURLToPath(new URL('../features/validation/hindcast.json', import.meta.url));
const report = hindcastReport({
  observations: readObservations(new URL('observations/', data)),
  tracks: readTracks(new URL('tracks/', data)),
  land: landIndex(),
});
writeFileSync(published, `${JSON.stringify(report, null, 2)}\n`);
for (const { settings, layer, rows, group, weight, count, bias, meanAbsolute } of report.errors) {
  if (group !== 'all') continue;
  const share = ({ value, low, high }: typeof bias) =>
    `${(100 * value).toFixed(1)} % (${(100 * low!).toFixed(1)} to ${(100 * high!).toFixed(1)})`;
  console.log(
    `${settings}, ${layer}, ${count} ${rows}, each ${weight} alike: bias ${share(bias)}, mean absolute error ${share(meanAbsolute)}`,
  );
}
for (const { title, count, bias, meanAbsolute } of report.readings) {
  console.log(`${title}: ${count}, bias ${(100 * bias).toFixed(1)} %, ${(100 * meanAbsolute).toFixed(1)} %`);
}
