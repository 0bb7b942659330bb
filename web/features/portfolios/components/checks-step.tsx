import { useQuery } from '@tanstack/react-query';
import { CircleCheck, Hand, StickyNote, type LucideIcon } from 'lucide-react';
import type { Edition, MessageGroup } from '#contract/portfolios.ts';
import { useRef, type KeyboardEvent } from 'react';
import { ApiError } from '../../../api/api-error.ts';
import { classNames } from '../../../lib/class-names.ts';
import { count, counted } from '../../../lib/numbers.ts';
import { Card } from '../../../ui/card.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { messagesQuery } from '../edition-queries.ts';
import { CONTROL_CODE, siteTiv, tivScale } from '../reconciliation.ts';
import { FileQuestions, isQuestion } from './file-questions.tsx';
import { EquationCard } from './equation-card.tsx';
import { FixPreview } from './fix-preview.tsx';

interface ChecksStepProps {
  edition: Edition;
  canWrite: boolean;
  /** Code of the group whose preview is open; the first one when none is named. */
  chosen: string | null;
  onChoose: (code: string) => void;
}

interface Section {
  title: string;
  icon: LucideIcon;
  tone: string;
  groups: MessageGroup[];
  rows: number;
}

/** Every group in one of three sections, in the order in which they need the person. */
const sectionsOf = (groups: MessageGroup[], edition: Edition): Section[] => {
  const held = groups.filter(
    ({ severity }) => severity === 'hold' || severity === 'stop' || severity === 'blocks_sealing',
  );
  const notes = groups.filter(({ severity }) => severity === 'note');
  const aside = groups.filter(({ severity }) => severity === 'set_aside');
  const rows = edition.reconciliation;
  return [
    { title: 'Held, can’t be scored', icon: Hand, tone: 'text-caution', groups: held, rows: rows?.held.rows ?? 0 },
    { title: 'Scored with notes', icon: StickyNote, tone: 'text-info', groups: notes, rows: rows?.notes.rows ?? 0 },
    { title: 'Set aside', icon: CircleCheck, tone: 'text-idle', groups: aside, rows: rows?.setAside.rows ?? 0 },
  ].filter((section) => section.groups.length > 0);
};

export function ChecksStep({ edition, canWrite, chosen, onChoose }: ChecksStepProps) {
  const messages = useQuery(messagesQuery(edition.id));
  const preview = useRef<HTMLDivElement>(null);
  if (!edition.reconciliation) return null;
  const scale = tivScale(siteTiv(edition.reconciliation), edition.currency);
  const groups = messages.data?.groups ?? [];
  // Said already: by a question, by the verdict beside the equation, or by a group of the list.
  const others = edition.messages.filter(
    ({ code }) => !isQuestion(code) && code !== CONTROL_CODE && !groups.some((group) => group.code === code),
  );
  const sections = sectionsOf(groups, edition);
  const inOrder = sections.flatMap((section) => section.groups);
  const open = inOrder.find(({ code }) => code === chosen) ?? inOrder[0];

  const move = (event: KeyboardEvent, step: number) => {
    const next = inOrder[inOrder.findIndex(({ code }) => code === open?.code) + step];
    if (!next) return;
    event.preventDefault();
    onChoose(next.code);
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key === 'j' || event.key === 'ArrowDown') move(event, 1);
    if (event.key === 'k' || event.key === 'ArrowUp') move(event, -1);
    if (event.key === 'Enter') preview.current?.querySelector<HTMLElement>('input, button')?.focus();
  };

  return (
    <>
      <EquationCard
        reconciliation={edition.reconciliation}
        currency={edition.currency}
        control={edition}
        className="mb-3.5 flex-none"
      />
      <FileQuestions edition={edition} canWrite={canWrite} />
      {messages.isSuccess && others.length > 0 && (
        <Message
          tone={others.every(({ severity }) => severity === 'note') ? 'info' : 'caution'}
          className="mb-3.5 flex-none"
        >
          {others.map(({ code, text }) => (
            <p key={code}>
              {text} <span className="text-ink-2">{code}</span>
            </p>
          ))}
        </Message>
      )}
      {messages.isError ? (
        <ProblemNotice
          title="The messages weren’t read"
          detail={messages.error.message}
          requestId={messages.error instanceof ApiError ? messages.error.requestId : ''}
          onRetry={() => messages.refetch()}
        />
      ) : messages.isPending ? (
        <Card>
          <div role="status" aria-label="Reading the messages" className="flex flex-col gap-4 py-2">
            {Array.from({ length: 6 }, (_, row) => (
              <Skeleton key={row} width={`${80 - 7 * row}%`} />
            ))}
          </div>
        </Card>
      ) : inOrder.length === 0 || !open ? (
        <Card>
          <p className="flex items-center gap-2 text-16 font-bold">
            <CircleCheck size={20} strokeWidth={1.75} className="text-done" aria-hidden />
            Every site can be scored, and nothing was assumed.
          </p>
        </Card>
      ) : (
        <div className="grid flex-1 items-start gap-4 wide:min-h-0 wide:grid-cols-[minmax(0,1fr)_minmax(0,0.94fr)] wide:items-stretch">
          <Card padded={false} className="wide:min-h-0 wide:overflow-y-auto">
            <Table label="Messages by kind">
              <thead>
                <tr>
                  <Th>Kind of message</Th>
                  <Th numeric>Rows</Th>
                  <Th numeric priority={2}>
                    TIV, {edition.currency} {scale.unit}
                  </Th>
                  <Th numeric>
                    <span className="sr-only">Fix on offer</span>
                  </Th>
                </tr>
              </thead>
              {sections.map((section) => (
                <tbody key={section.title} onKeyDown={onKeyDown}>
                  <tr className="border-b border-rule bg-well">
                    <th scope="colgroup" colSpan={4} className="h-8 px-4 text-left text-13">
                      <span className="flex items-center gap-1.75">
                        <section.icon size={16} strokeWidth={1.75} className={section.tone} aria-hidden />
                        <span className={section.tone}>{section.title}</span>
                        <span className="ml-auto font-normal text-ink-2">{counted(section.rows, 'row')}</span>
                      </span>
                    </th>
                  </tr>
                  {section.groups.map((group) => (
                    <GroupRow
                      key={group.code}
                      group={group}
                      tiv={scale.text(group.tivMinor)}
                      selected={group.code === open.code}
                      onChoose={() => onChoose(group.code)}
                    />
                  ))}
                </tbody>
              ))}
            </Table>
          </Card>
          <div ref={preview} className="min-h-0 min-w-0">
            <FixPreview key={open.code} edition={edition} group={open} canWrite={canWrite} />
          </div>
        </div>
      )}
    </>
  );
}

interface GroupRowProps {
  group: MessageGroup;
  tiv: string;
  selected: boolean;
  onChoose: () => void;
}

function GroupRow({ group, tiv, selected, onChoose }: GroupRowProps) {
  return (
    <Tr selected={selected} onClick={onChoose}>
      <Td>
        <button
          type="button"
          aria-pressed={selected}
          className={classNames('py-1.5 text-left leading-snug', selected && 'font-bold')}
        >
          {group.title}
          <span className="ml-2 text-12 font-normal tracking-wide whitespace-nowrap text-ink-2 max-rail:hidden">
            {group.code}
          </span>
        </button>
      </Td>
      <Td numeric className="font-bold">
        {count(group.rows)}
      </Td>
      <Td numeric priority={2}>
        {tiv}
      </Td>
      <Td numeric className="text-13 font-bold whitespace-nowrap text-link">
        {group.fix?.label ?? <span className="font-normal text-ink-2">See rows</span>}
      </Td>
    </Tr>
  );
}
