import { useRef, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { Save } from 'lucide-react';
import { Link } from 'react-router-dom';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import { changeWords } from '#contract/variant-words.ts';
import type { VariantsReply, VariantsRequest } from '#contract/variants.ts';
import { ApiError } from '../../../api/api-error.ts';
import { failureOf } from '../../../api/failure.ts';
import { newIdempotencyKey } from '../../../api/idempotency-key.ts';
import { classNames } from '../../../lib/class-names.ts';
import { counted } from '../../../lib/numbers.ts';
import { useDelayed } from '../../../lib/use-delayed.ts';
import { useSettled } from '../../../lib/use-settled.ts';
import { useUnits } from '../../../lib/units.tsx';
import { paths } from '../../../paths.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { placeWords } from '../landfalls.ts';
import { FIRST_FORM, requestOf } from '../variant-form.ts';
import { useSaveVariants, variantsQuery } from '../variant-queries.ts';
import { LandfallStrips } from './landfall-strips.tsx';
import { SaveProblem } from './save-problem.tsx';
import { VariantsForm } from './variants-form.tsx';
import { VariantsMap } from './variants-map.tsx';

const SETTLE_MS = 350;
/** Said on every result; they stand in the strip at the foot of the screen already. */
const SAID_ELSEWHERE = ['chosen-spread', 'life-safety', 'uncertainty', 'scope'];

interface VariantsTabProps {
  /** The version that is changed. */
  scenario: ScenarioVersion;
  canSave: boolean;
}

/** Changed copies of a track: offset, turned, stronger, faster, wider; one by one or as an ensemble from a seed. */
export function VariantsTab({ scenario, canSave }: VariantsTabProps) {
  const [form, setForm] = useState(FIRST_FORM);
  const settled = useSettled(form, SETTLE_MS);
  const asked = requestOf(settled);
  const version = scenario.number;
  const body: VariantsRequest | null = 'missing' in asked ? null : { version, ...asked };
  const preview = useQuery(variantsQuery(scenario.scenarioId, body));
  const save = useSaveVariants(scenario.scenarioId);
  const key = useRef(newIdempotencyKey());
  const waits = useDelayed(body !== null && preview.isPending);
  const isOld = preview.isPlaceholderData || settled !== form;
  const made = preview.data?.variants.length ?? 0;

  const submit = () => {
    if (!body) return;
    save.mutate({ body, key: key.current }, { onSettled: () => (key.current = newIdempotencyKey()) });
  };
  return (
    <div className="grid grid-cols-[20rem_minmax(0,1fr)] items-start gap-3.5 max-wide:grid-cols-1">
      <VariantsForm
        form={form}
        onForm={(next) => {
          setForm(next);
          save.reset();
        }}
        foot={
          canSave ? (
            <Button
              variant="filled"
              icon={Save}
              className="w-full"
              pending={save.isPending}
              disabledReason={
                'missing' in asked
                  ? asked.missing
                  : preview.isError
                    ? 'This change can’t be used.'
                    : preview.data === undefined || isOld
                      ? 'The preview comes first.'
                      : undefined
              }
              onClick={submit}
            >
              {made > 1 ? `Save ${made} variants` : 'Save this variant'}
            </Button>
          ) : (
            <p className="text-13 text-ink-2">Underwriters and modelers can save variants.</p>
          )
        }
      />
      <div className="flex min-w-0 flex-col gap-3.5">
        <p className="text-13 text-ink-2">
          <b className="text-ink">A chosen spread, not a forecast cone.</b> No variant is likelier than another. Each is
          saved as a scenario of its own that names version {version} and the change it was made with.
        </p>
        {save.isError && <SaveProblem error={save.error} />}
        {save.isSuccess && <Saved reply={save.data} />}
        {'missing' in asked ? (
          <Message tone="info">{asked.missing} The preview follows what you type.</Message>
        ) : preview.isError ? (
          <PreviewProblem error={preview.error} onRetry={() => preview.refetch()} />
        ) : preview.data ? (
          <div
            aria-busy={isOld}
            className={classNames('flex flex-col gap-3.5 transition-opacity duration-(--quick)', isOld && 'opacity-60')}
          >
            <VariantsMap reply={preview.data} />
            {preview.data.notices
              .filter(({ code }) => !SAID_ELSEWHERE.includes(code))
              .map(({ code, text }) => (
                <Message key={code} tone={code === 'provisional' ? 'event' : 'info'}>
                  {text}
                </Message>
              ))}
            <Card>
              <LandfallStrips reply={preview.data} fileName={`${scenario.name}-v${version}-variants`} />
            </Card>
            <VariantList reply={preview.data} />
          </div>
        ) : (
          waits && <Waiting />
        )}
      </div>
    </div>
  );
}

/** A change that leads to no usable track is the person's to correct; anything else can be tried again. */
function PreviewProblem({ error, onRetry }: { error: Error; onRetry: () => Promise<unknown> }) {
  const faults = error instanceof ApiError ? error.faults : [];
  if (!(error instanceof ApiError) || error.code !== 'invalid_request')
    return <ProblemNotice title="The variants weren’t worked out" {...failureOf(error)} onRetry={onRetry} />;
  return (
    <Message tone="caution" title="This can’t be a track" live>
      <p>{error.message}</p>
      {faults.length > 1 && (
        <ul className="mt-1.5 list-disc pl-4">
          {faults.slice(0, 5).map(({ message }) => (
            <li key={message}>{message}</li>
          ))}
          {faults.length > 5 && <li>and {counted(faults.length - 5, 'more')}</li>}
        </ul>
      )}
    </Message>
  );
}

function Waiting() {
  return (
    <div aria-hidden className="flex flex-col gap-3.5">
      <Skeleton className="h-105 max-rail:h-75" />
      <Card>
        <div className="flex flex-col gap-4">
          {[60, 90, 90, 90].map((width, index) => (
            <Skeleton key={index} width={`${width}%`} />
          ))}
        </div>
      </Card>
    </div>
  );
}

function Saved({ reply: { variants } }: { reply: VariantsReply }) {
  return (
    <Message tone="done" title={`${counted(variants.length, 'scenario')} saved`} live>
      <ul className="mt-0.5">
        {variants.map(({ name, scenarioId }) => (
          <li key={name}>
            <Link to={paths.scenario(scenarioId!)}>{name}</Link>
          </li>
        ))}
      </ul>
    </Message>
  );
}

/** What each variant changes, and the same landfalls as numbers. */
function VariantList({ reply: { base, variants } }: { reply: VariantsReply }) {
  const { gust, label } = useUnits();
  return (
    <Card padded={false} className="overflow-hidden">
      <Table label="Variants">
        <thead>
          <tr>
            <Th>Variant</Th>
            <Th priority={2}>Landfall</Th>
            <Th numeric>Wind ashore, {label}</Th>
            <Th numeric priority={2}>
              Strongest, {label}
            </Th>
          </tr>
        </thead>
        <tbody>
          {[base, ...variants].map((variant, index) => (
            <Tr key={variant.name} selected={index === 0}>
              <Td className="py-2 text-13">
                <b className="block">{index === 0 ? `${variant.name}, as saved` : variant.name}</b>
                {index > 0 && <span className="text-ink-2">{changeWords(variant.change) || 'nothing changed'}</span>}
              </Td>
              <Td priority={2} className="text-13">
                {variant.landfall ? placeWords(variant.landfall) : 'never ashore'}
              </Td>
              <Td numeric>{variant.landfall ? gust(variant.landfall.maxWindMs) : '–'}</Td>
              <Td numeric priority={2}>
                {gust(variant.maxWindMs)}
              </Td>
            </Tr>
          ))}
        </tbody>
      </Table>
    </Card>
  );
}
