import { CircleHelp } from 'lucide-react';
import type { Edition } from '#contract/portfolios.ts';
import { Button } from '../../../ui/button.tsx';
import { Message } from '../../../ui/message.tsx';
import { useMapColumns } from '../edition-queries.ts';
import { mappingWith, type MappingForm } from '../mapping-form.ts';

type Answer = Partial<Pick<MappingForm, 'decimal' | 'valuesIn'>>;

/** Questions about the whole file, each with its possible answers. */
const QUESTIONS: Record<string, { title: string; answers: (currency: string) => { label: string; answer: Answer }[] }> =
  {
    'FILE-03': {
      title: 'How are numbers written?',
      answers: () => [
        { label: 'Decimal point, 1,234.50', answer: { decimal: 'point' } },
        { label: 'Decimal comma, 1.234,50', answer: { decimal: 'comma' } },
      ],
    },
    'FILE-05': {
      title: 'Are the values in thousands?',
      answers: (currency) => [
        { label: 'Yes, multiply by 1,000', answer: { valuesIn: 'thousands' } },
        { label: `No, they are in ${currency}`, answer: { valuesIn: 'units' } },
      ],
    },
  };

export const isQuestion = (code: string): boolean => code in QUESTIONS;

/** Asked once a file, never answered by us; an answer starts the checks again. */
export function FileQuestions({ edition, canWrite }: { edition: Edition; canWrite: boolean }) {
  const mapColumns = useMapColumns(edition.id);
  return edition.messages
    .filter(({ code }) => isQuestion(code))
    .map(({ code, text }) => {
      const question = QUESTIONS[code]!;
      return (
        <Message
          key={code}
          tone="caution"
          icon={CircleHelp}
          title={
            <>
              {question.title} <span className="font-normal text-ink-2">{code}</span>
            </>
          }
          className="mb-3.5 flex-none"
          action={
            canWrite &&
            edition.state === 'checked' && (
              <div className="flex flex-wrap gap-2">
                {question.answers(edition.currency).map(({ label, answer }) => (
                  <Button
                    key={label}
                    size="small"
                    pending={mapColumns.isPending}
                    onClick={() => mapColumns.mutate(mappingWith(edition, answer))}
                  >
                    {label}
                  </Button>
                ))}
              </div>
            )
          }
        >
          <p>{text}</p>
          {mapColumns.isError && <p className="mt-1 font-bold text-error">{mapColumns.error.message}</p>}
        </Message>
      );
    });
}
