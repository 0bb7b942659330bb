import { useRef, useState, type KeyboardEvent } from 'react';
import { classNames } from '../../../lib/class-names.ts';
import { Button, ButtonLink } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import type { WaitingItem } from '../waiting.ts';

const SHOWN = 6;
const TINTS = {
  info: 'bg-info-tint text-info',
  caution: 'bg-caution-tint text-caution',
  error: 'bg-error-tint text-error',
};

interface WaitingCardProps {
  items: readonly WaitingItem[];
  loading: boolean;
  /** Said when nothing waits. */
  quiet: string;
}

/** The first item's action is the page's one filled button; j and k move between the actions. */
export function WaitingCard({ items, loading, quiet }: WaitingCardProps) {
  const [all, setAll] = useState(false);
  const list = useRef<HTMLUListElement>(null);
  const shown = all ? items : items.slice(0, SHOWN);
  const onKeyDown = (event: KeyboardEvent) => {
    const step = event.key === 'j' ? 1 : event.key === 'k' ? -1 : 0;
    if (step === 0) return;
    const links = [...(list.current?.querySelectorAll<HTMLElement>('a') ?? [])];
    const next = links[links.indexOf(document.activeElement as HTMLElement) + step];
    next?.focus();
  };
  return (
    <Card title="Waiting for you" aside={items.length > 1 ? 'most pressing first' : undefined} padded={false}>
      <ul ref={list} onKeyDown={onKeyDown} className="mt-2">
        {loading ? (
          Array.from({ length: 3 }, (_, row) => (
            <li key={row} className="flex flex-col gap-2.5 border-t border-rule px-4 py-4">
              <Skeleton width="38%" />
              <Skeleton width="62%" />
            </li>
          ))
        ) : items.length === 0 ? (
          <li className="border-t border-rule px-4 py-6 text-ink-2">{quiet}</li>
        ) : (
          shown.map((item, index) => (
            <li
              key={item.key}
              className="grid grid-cols-[36px_minmax(0,1fr)_auto_136px] items-center gap-3.5 border-t border-rule px-4 py-2.75 max-rail:grid-cols-[32px_minmax(0,1fr)] max-rail:gap-x-3 max-rail:gap-y-0.5 max-rail:px-3.5 max-rail:py-3"
            >
              <span
                className={classNames(
                  'grid size-9 place-items-center rounded-2 max-rail:row-span-3 max-rail:size-8 max-rail:self-start',
                  TINTS[item.tone],
                )}
              >
                <item.icon size={18} strokeWidth={1.75} aria-hidden />
              </span>
              <div className="min-w-0">
                <b className="text-15">{item.title}</b>
                <p className="mt-px text-13 text-ink-2">{item.text}</p>
              </div>
              <span className="text-13 whitespace-nowrap text-ink-2 max-rail:col-start-2">{item.when}</span>
              <ButtonLink
                to={item.action.to}
                size="small"
                variant={index === 0 ? 'filled' : 'outlined'}
                className="max-rail:col-start-2 max-rail:mt-1.5 max-rail:justify-self-start"
              >
                {item.action.label}
              </ButtonLink>
            </li>
          ))
        )}
      </ul>
      {items.length > SHOWN && !all && (
        <div className="border-t border-rule px-4 py-2">
          <Button variant="quiet" size="small" onClick={() => setAll(true)}>
            All {items.length}
          </Button>
        </div>
      )}
    </Card>
  );
}
