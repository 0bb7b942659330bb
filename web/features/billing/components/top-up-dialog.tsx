import { useRef, useState } from 'react';
import { ExternalLink } from 'lucide-react';
import { newIdempotencyKey } from '../../../api/idempotency-key.ts';
import { exactMoney, minorPerUnit } from '../../../lib/money.ts';
import { Button } from '../../../ui/button.tsx';
import { Dialog } from '../../../ui/dialog.tsx';
import { TextField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { useCreateTopUp } from '../billing-queries.ts';
import { LARGEST_MINOR, minorFrom, SMALLEST_MINOR } from '../top-up-amount.ts';

const SUGGESTED_UNITS = [100, 250, 500, 1000];

interface TopUpDialogProps {
  currency: string;
  onClose: () => void;
  /** Leads to the provider's page. */
  onLeave: (checkoutUrl: string) => void;
}

/** The amount here, the card only on the provider's page. */
export function TopUpDialog({ currency, onClose, onLeave }: TopUpDialogProps) {
  const [text, setText] = useState('250.00');
  const [asked, setAsked] = useState(false);
  const create = useCreateTopUp();
  const intent = useRef({ text: '', key: '' });
  const minor = minorFrom(text, currency);
  const fault =
    minor === null
      ? `Write an amount in ${currency}, for example 250.00.`
      : minor < SMALLEST_MINOR
        ? `The smallest top-up is ${exactMoney(SMALLEST_MINOR, currency)}.`
        : minor > LARGEST_MINOR
          ? `The largest top-up is ${exactMoney(LARGEST_MINOR, currency)}.`
          : undefined;

  const start = () => {
    setAsked(true);
    if (minor === null || fault) return;
    // The same amount pressed twice is one top-up; another amount is another.
    if (intent.current.text !== text) intent.current = { text, key: newIdempotencyKey() };
    create.mutate(
      { amountMinor: minor, key: intent.current.key },
      {
        onSuccess: ({ checkoutUrl }) => {
          if (checkoutUrl) onLeave(checkoutUrl);
        },
        onError: () => (intent.current = { text: '', key: '' }),
      },
    );
  };

  return (
    <Dialog
      open
      onClose={onClose}
      title="Top up the prepaid balance"
      actions={
        <>
          <Button onClick={onClose}>Not now</Button>
          <Button variant="filled" icon={ExternalLink} pending={create.isPending || create.isSuccess} onClick={start}>
            Pay {minor !== null && !fault ? exactMoney(minor, currency) : ''}
          </Button>
        </>
      }
    >
      <TextField
        label="Amount"
        unit={currency}
        inputMode="decimal"
        value={text}
        error={asked ? fault : undefined}
        onChange={(event) => setText(event.target.value)}
      />
      <div className="mt-2 flex flex-wrap gap-2">
        {SUGGESTED_UNITS.map((units) => {
          const amount = exactMoney(units * minorPerUnit(currency), currency);
          return (
            <Button key={units} size="small" onClick={() => setText(`${units}.00`)}>
              {amount}
            </Button>
          );
        })}
      </div>
      <p className="mt-3 text-13 text-ink-2">
        You pay on the payment provider’s page; card details are entered only there. The balance moves when the provider
        confirms the payment, usually within a minute.
      </p>
      {create.isError && (
        <Message tone="error" className="mt-3">
          {create.error.message}
        </Message>
      )}
    </Dialog>
  );
}
