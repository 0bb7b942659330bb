import { useState, type ReactNode } from 'react';
import { RotateCcw } from 'lucide-react';
import { Button } from './button.tsx';
import { Message } from './message.tsx';

interface ProblemProps {
  title: ReactNode;
  detail: ReactNode;
  /** Number to quote when asking for help. */
  requestId?: string;
  onRetry?: () => void | Promise<unknown>;
  className?: string;
}

/** What, where, why and what to do, with the request's number. */
export function ProblemNotice({ title, detail, requestId, onRetry, className }: ProblemProps) {
  const [trying, setTrying] = useState(false);
  return (
    <Message
      tone="error"
      title={title}
      className={className}
      action={
        onRetry && (
          <Button
            size="small"
            icon={RotateCcw}
            pending={trying}
            onClick={() => {
              setTrying(true);
              void Promise.resolve(onRetry()).finally(() => setTrying(false));
            }}
          >
            Try again
          </Button>
        )
      }
    >
      <p>{detail}</p>
      {requestId && <p className="mt-0.5 text-12 text-ink-2">Request {requestId}</p>}
    </Message>
  );
}
