import type { ReactNode } from 'react';
import { ApiError } from '../../../api/api-error.ts';
import { Message } from '../../../ui/message.tsx';

/** Why the track wasn't saved, with every finding that stands in the way. */
export function SaveProblem({ error, action }: { error: Error; action?: ReactNode }) {
  const faults = error instanceof ApiError ? error.faults : [];
  return (
    <Message tone="error" title="Not saved" action={action}>
      <p>{error.message}</p>
      {faults.length > 0 && (
        <ul className="mt-1.5 list-disc pl-4">
          {faults.map((fault) => (
            <li key={`${fault.path}${fault.message}`}>
              {fault.message} {fault.code && <span className="text-12 text-ink-2">{fault.code}</span>}
            </li>
          ))}
        </ul>
      )}
    </Message>
  );
}
