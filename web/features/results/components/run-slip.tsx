import type { ReactNode } from 'react';
import { useQuery } from '@tanstack/react-query';
import { Copy, Download, Printer } from 'lucide-react';
import type { RunSlip } from '#contract/runs.ts';
import { ageWords } from '#contract/track-age.ts';
import { failureOf } from '../../../api/failure.ts';
import { day, utc } from '../../../lib/dates.ts';
import { exactMoney } from '../../../lib/money.ts';
import { count, counted } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Button, IconButton } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { saveText } from '../../../ui/charts/chart-frame.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { useToast } from '../../../ui/toast.tsx';
import { slipQuery } from '../result-queries.ts';

/** Everything the run rests on, by version and digest. */
export function RunSlipTab({ runId }: { runId: string }) {
  const slip = useQuery(slipQuery(runId));
  if (slip.isError)
    return <ProblemNotice title="The run slip wasn’t read" {...failureOf(slip.error)} onRetry={() => slip.refetch()} />;
  if (!slip.data)
    return (
      <Card className="max-w-240">
        <div className="flex flex-col gap-4" aria-hidden>
          {Array.from({ length: 8 }, (_, index) => (
            <Skeleton key={index} width={`${70 - index * 5}%`} />
          ))}
        </div>
      </Card>
    );
  return <Slip slip={slip.data} />;
}

function Slip({ slip }: { slip: RunSlip }) {
  const { gust, label } = useUnits();
  const { options } = slip;
  return (
    <div className="max-w-260">
      <div className="mb-3.5 flex flex-wrap items-center gap-2">
        <p className="min-w-0 flex-1 basis-90 text-ink-2">
          A second run from these inputs and this engine gives the same digits. Keep it with the underwriting file.
        </p>
        <Button icon={Printer} onClick={() => print()} data-print="hide">
          Print
        </Button>
        <Button
          variant="filled"
          icon={Download}
          data-print="hide"
          onClick={() => saveText(`${slip.run}-slip.json`, JSON.stringify(slip, null, 2), 'application/json')}
        >
          Download JSON
        </Button>
      </div>
      <Card padded={false} className="overflow-hidden">
        <Section title="Run">
          <Row term="Number">{slip.run}</Row>
          <Row term="Accepted">
            {utc(slip.acceptedAt)} by {slip.acceptedBy}
          </Row>
          <Row term="Finished">{slip.finishedAt ? utc(slip.finishedAt) : 'not yet'}</Row>
          <Row term="Purpose">{slip.purpose.replaceAll('_', ' ')}</Row>
          <Row term="Inputs" digest={slip.inputsDigest}>
            all of them, as one digest
          </Row>
          <Row term="Engine">{slip.engineVersion}</Row>
          <Row term="Vortex draws">{slip.draws}</Row>
        </Section>
        <Section title="Edition">
          <Row term={slip.edition.portfolio} digest={slip.edition.digest}>
            edition {slip.edition.number}
            {slip.edition.asAt && `, as at ${day(slip.edition.asAt)}`}; {counted(slip.edition.sites, 'site')},{' '}
            {count(slip.edition.held)} held
          </Row>
        </Section>
        {slip.scenarios.map((scenario) => (
          <Section key={scenario.digest} title={`${scenario.name}, version ${scenario.version}`}>
            <Row term="Track" digest={scenario.digest}>
              {scenario.source || 'source not stated'}
            </Row>
            {scenario.asOf && (
              <Row term="As of">
                {utc(scenario.asOf)}, {ageWords(scenario.ageHoursWhenRun ?? 0)} old when run
                {scenario.staleWhenRun && ', stale'}
              </Row>
            )}
            <Row term="Winds">
              averaged over {scenario.windAveragingS} s; {scenario.conversion}
            </Row>
            <Row term="Filled">
              {scenario.filled.length === 0 ? 'nothing' : scenario.filled.map(filledWords).join('; ')}
            </Row>
            <Row term="Result" digest={scenario.resultDigest ?? undefined}>
              {scenario.resultDigest ? 'all sites, as one digest' : 'none yet'}
            </Row>
          </Section>
        ))}
        <Section title="Model">
          <Row term="Calibration" digest={slip.calibration.digest}>
            {slip.calibration.code}, version {slip.calibration.version}, {slip.calibration.state}
          </Row>
          <Row term="Curve set" digest={slip.curveSet.digest}>
            {slip.curveSet.name}, version {slip.curveSet.version}
          </Row>
          <Row term="Options">
            eyewall vortices {options.mesovortices ? 'on' : 'off'}; intensity from {options.intensity}; track wind{' '}
            {options.anchor}; gust chance above {options.gustThresholdsMs.map(gust).join(' and ')} {label}
          </Row>
          <Row term="Wind choices">
            {slip.choices.length === 0 ? 'every one at its default' : slip.choices.join('; ')}
          </Row>
        </Section>
        <Section title="Price">
          <Row term={`Quote ${slip.quote.number}`}>
            {exactMoney(slip.quote.grossMinor, slip.quote.currency)} at most, tariff {slip.quote.tariffVersion}
          </Row>
          <Row term="Charged">
            {slip.chargedMinor === null ? 'not yet' : exactMoney(slip.chargedMinor, slip.quote.currency)}
          </Row>
        </Section>
        <Section title="Cautions">
          {slip.notices.map((notice) => (
            <Row key={notice.code} term={notice.code.replaceAll('-', ' ')}>
              {notice.text} <span className="text-12 text-ink-2">version {notice.version}</span>
            </Row>
          ))}
        </Section>
      </Card>
    </div>
  );
}

const FIELD_WORDS: Record<string, string> = {
  ambientPressureHpa: 'pressure outside',
  centralPressureHpa: 'central pressure',
  maxWindMs: 'maximum wind',
  radiusOfMaxWindM: 'radius of maximum wind',
  ringWidthFraction: 'ring width',
  eyeVorticityRatio: 'eye vorticity ratio',
  hoursInland: 'hours inland',
};
/** The slip names fields as the file does; here they are words. */
const filledWords = (line: string) => line.replace(/^\w+/, (field) => FIELD_WORDS[field] ?? field);

function Section({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section aria-label={title} className="border-b border-rule px-4.5 py-3 last:border-b-0">
      <h2 className="mb-1 text-15">{title}</h2>
      <dl>{children}</dl>
    </section>
  );
}

function Row({ term, digest, children }: { term: string; digest?: string | undefined; children: ReactNode }) {
  return (
    <div className="grid grid-cols-[11rem_minmax(0,1fr)_auto] items-baseline gap-3 py-1 max-rail:grid-cols-1 max-rail:gap-0">
      <dt className="text-13 text-ink-2 first-letter:uppercase">{term}</dt>
      <dd>{children}</dd>
      {digest && <Digest digest={digest} />}
    </div>
  );
}

/** First eight characters, the whole of it on copy. */
function Digest({ digest }: { digest: string }) {
  const toast = useToast();
  return (
    <dd className="flex items-center gap-1 text-13 text-ink-2">
      <code title={digest}>{digest.slice(0, 8)}</code>
      <IconButton
        label={`Copy the digest ${digest.slice(0, 8)}`}
        icon={Copy}
        className="-my-1.5"
        data-print="hide"
        onClick={() => void navigator.clipboard.writeText(digest).then(() => toast({ text: 'Digest copied.' }))}
      />
    </dd>
  );
}
