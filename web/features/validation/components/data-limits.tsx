import type { Validation } from '#contract/validation.ts';
import { counted } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Card } from '../../../ui/card.tsx';
import { Message } from '../../../ui/message.tsx';
import { errorsFor, points, residualOf, share, shareRange, signedShare } from '../validation-words.ts';

const STRONG_MS = 58;

/** What the comparison can't show, said beside it. */
export function DataLimits({ validation }: { validation: Validation }) {
  const { gust, label } = useUnits();
  const { observations } = validation;
  const of = <T extends { settings: string }>(list: readonly T[], settings: string): T =>
    list.find((one) => one.settings === settings)!;
  const plain = errorsFor(validation, { settings: 'default' });
  const enhanced = errorsFor(validation, { settings: 'default', layer: 'enhanced' });
  const running = errorsFor(validation, { settings: 'default', rows: 'running' });
  const inBand = of(validation.withinBand, 'default');
  const below = of(validation.belowLowerBound, 'default');
  const belowByWind = of(validation.belowLowerBound, 'wind');
  const lead = of(validation.againstDefault, 'wind').meanAbsolute;
  const recalled = observations.filter(({ role, how }) => role === 'P' && how === 'memory').length;
  const noHeight = observations.filter(({ role, heightM }) => role === 'P' && heightM === null).length;
  const strong = observations
    .filter(({ role, standardisedMs }) => role === 'P' && standardisedMs! >= STRONG_MS)
    .map((one) => residualOf(one, one.modelled.default.plainMs)!);
  const strongBias = strong.reduce((sum, residual) => sum + residual, 0) / strong.length;
  const largest = Math.max(
    ...validation.errors.filter(({ group, layer }) => group === 'storm' && layer === 'plain').map(({ count }) => count),
  );
  const leadIsClear = lead.low !== null && lead.high !== null && (lead.high < 0 || lead.low > 0);
  return (
    <Card title="What this can’t show">
      <Message tone="caution" title="The enhanced band isn’t a prediction interval.">
        It is the spread of one effect, where the vortices are and how strong. {inBand.count} of {inBand.of} observed
        peaks lie inside it. No wind record validates the mesovortex enhancement: the median of the draws has a bias of{' '}
        {signedShare(enhanced.bias.value)} against {signedShare(plain.bias.value)} plain, and a mean error of{' '}
        {share(enhanced.meanAbsolute.value)} against {share(plain.meanAbsolute.value)}.
      </Message>
      <ul className="mt-3 flex list-disc flex-col gap-1.5 pl-5 text-14">
        <li>
          <b>Not an independent test.</b> Nothing was fitted to these storms, but the default was chosen among published
          relations with these storms in view. That pressure does better than wind here is part of why it is the
          default.
        </li>
        <li>
          <b>Few storms.</b> {counted(plain.count, 'peak')} in {counted(plain.storms, 'storm')}, {largest} of them in
          one. The default’s mean error less that of wind is {points(lead.value)} ({shareRange(lead)} over the
          resamples)
          {leadIsClear ? '' : ': the range includes zero, so these data alone don’t settle it'}.
        </li>
        <li>
          <b>The strongest gusts.</b> At the {counted(strong.length, 'place')} that saw {gust(STRONG_MS)} {label} and
          more the bias is {signedShare(strongBias)}. Picking places by what was observed lowers such a figure by
          itself.
        </li>
        <li>
          <b>Open data.</b> Public copies of preliminary reports, not the agencies’ station tables. Heights are unstated
          at {noHeight} of the scored places and taken as 10 m, averaging as 3 s; {recalled} values are recalled, not
          read. Exposure is the gatherer’s reading.
        </li>
        <li>
          <b>Places.</b> Airports and coastal stations within about 1 km; towns and areas 2 to 10 km. Beside an eyewall
          that alone is several m/s.
        </li>
        <li>
          <b>Stations fail in strong wind.</b> {counted(running.count, 'gust')} reported before the peak are compared
          with the highest modelled gust up to then: bias {signedShare(running.bias.value)}, mean error{' '}
          {share(running.meanAbsolute.value)}. Of {counted(below.of, 'lower bound')} the plain gust falls short of{' '}
          {below.count} by pressure and {belowByWind.count} by wind.
        </li>
        <li>
          <b>Not calibrated here.</b> Good for bias, spread and ranking, not for one site. Real storms are named on this
          page because their measurements are; the demonstration’s storms and sites are made up.
        </li>
      </ul>
    </Card>
  );
}
