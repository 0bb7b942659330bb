import type { ReactNode } from 'react';
import { FrameContext } from './frame-context.ts';
import { Rail, type WorkingRun } from './rail.tsx';
import { TabBar } from './tab-bar.tsx';
import type { NavigationItem } from './navigation.ts';

interface FrameProps {
  organisation: { name: string; initials: string };
  person: { name: string; role: string };
  work: readonly NavigationItem[];
  model: readonly NavigationItem[];
  account: readonly NavigationItem[];
  working: readonly WorkingRun[];
  readOnlyChip: string | null;
  onSignOut: () => void;
  children: ReactNode;
}

const MAX_TABS = 4;

/** Rail, and room for a page's top bar, main and note; bottom tabs on a phone. */
export function Frame({
  organisation,
  person,
  work,
  model,
  account,
  working,
  readOnlyChip,
  onSignOut,
  children,
}: FrameProps) {
  return (
    <FrameContext value={{ readOnlyChip }}>
      <a
        href="#content"
        className="fixed top-2 left-2 z-50 -translate-y-20 rounded-2 bg-action px-4 py-2 font-bold text-on-fill focus:translate-y-0"
        onClick={(event) => {
          event.preventDefault();
          document.getElementById('content')?.focus();
        }}
      >
        Skip to content
      </a>
      <div className="grid h-dvh grid-cols-[var(--rail-w)_minmax(0,1fr)] grid-rows-[var(--top-h)_minmax(0,1fr)_auto] max-wide:grid-cols-[var(--rail-w-slim)_minmax(0,1fr)] max-rail:grid-cols-[minmax(0,1fr)] max-rail:grid-rows-[3rem_minmax(0,1fr)_auto_3.625rem] print:block print:h-auto">
        <Rail {...{ organisation, person, working, onSignOut }} groups={[work, model, account]} />
        {children}
        <TabBar
          items={work.slice(0, MAX_TABS)}
          more={[...work.slice(MAX_TABS), ...model, ...account]}
          {...{ person, organisation, onSignOut }}
        />
      </div>
    </FrameContext>
  );
}
