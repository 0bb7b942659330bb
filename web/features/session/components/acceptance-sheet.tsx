import { useId, useState } from 'react';
import { ArrowRight, LogOut, Printer } from 'lucide-react';
import { NOTICE_THEMES } from '#contract/notices.ts';
import type { Session } from '#contract/session.ts';
import { day } from '../../../lib/dates.ts';
import { Button } from '../../../ui/button.tsx';
import { Checkbox, TextField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { NOTICE_ICONS } from '../notice-icons.ts';
import { useAcceptNotes, useSignOut } from '../session-queries.ts';

interface AcceptanceSheetProps {
  session: Session;
  onAccepted: () => void;
  onSignedOut: () => void;
}

const firstName = (name: string) => name.split(' ')[0] ?? name;

/** The six limits in full, then tick, name and button in one strip. The version accepted is recorded. */
export function AcceptanceSheet({ session, onAccepted, onSignedOut }: AcceptanceSheetProps) {
  const version = session.acceptanceRequired ?? '';
  const accept = useAcceptNotes();
  const signOut = useSignOut();
  const [read, setRead] = useState(false);
  const [name, setName] = useState(session.person.name);
  const [asked, setAsked] = useState(false);
  const titleId = useId();
  const nameMissing = name.trim().length < 2;

  return (
    <form
      noValidate
      aria-labelledby={titleId}
      className="w-265 rounded-3 border border-rule bg-sheet shadow-2"
      onSubmit={(event) => {
        event.preventDefault();
        setAsked(true);
        if (read && !nameMissing) accept.mutate({ version, name: name.trim() }, { onSuccess: onAccepted });
      }}
    >
      <header className="flex items-end justify-between gap-4 border-b border-rule px-8 pt-6 pb-4.5 max-wide:block max-rail:p-4">
        <div>
          <h1 id={titleId} className="text-28 tracking-tight">
            Before your first run, {firstName(session.person.name)}
          </h1>
          <p className="mt-0.75 text-15 text-ink-2">
            Six limits that hold for every number here. About two minutes to read.
          </p>
        </div>
        <p className="text-right text-13 leading-normal text-ink-2 max-wide:mt-2 max-wide:text-left">
          Limits of use, <br className="max-wide:hidden" />
          version of <b className="text-ink">{day(version)}</b>
        </p>
      </header>
      <div className="grid grid-cols-2 gap-x-11 px-8 pt-1.5 pb-2.5 max-wide:grid-cols-1 max-rail:px-4">
        {NOTICE_THEMES.map(({ code, title, text }, index) => {
          const Icon = NOTICE_ICONS[code];
          return (
            <section
              key={code}
              className="border-t border-rule pt-3.5 pb-3.25 first:border-t-0 wide:[&:nth-child(2)]:border-t-0"
            >
              <h2 className="mb-1.25 flex items-center gap-2.5 text-16">
                <Icon size={17} strokeWidth={1.75} className="text-action" aria-hidden />
                {index + 1}. {title}
              </h2>
              <p className="max-w-[66ch] pl-6.75 text-14 leading-normal max-rail:pl-0">{text}</p>
            </section>
          );
        })}
      </div>
      <div className="grid grid-cols-[minmax(0,1fr)_230px_auto] items-end gap-6 border-t border-rule-strong bg-well px-8 pt-4 pb-4.5 max-wide:grid-cols-1 max-wide:gap-4 max-rail:p-4">
        <Checkbox
          className="self-center"
          label="I have read these limits and will keep to them."
          hint={
            asked && !read ? (
              <span className="font-bold text-error">Tick this when you have read them.</span>
            ) : (
              'They stay one click away, in the strip at the foot of every page and in every file.'
            )
          }
          checked={read}
          aria-invalid={asked && !read}
          onChange={(event) => setRead(event.target.checked)}
        />
        <TextField
          label="Your full name"
          height="tall"
          autoComplete="name"
          value={name}
          error={asked && nameMissing ? 'Write your name as it stands in your organisation.' : undefined}
          onChange={(event) => setName(event.target.value)}
        />
        <Button
          type="submit"
          variant="filled"
          trailingIcon={ArrowRight}
          pending={accept.isPending}
          className="h-11! px-4.5! text-15"
        >
          Accept and go on
        </Button>
        {accept.isError && (
          <Message tone="error" className="col-span-full">
            {accept.error.message}
          </Message>
        )}
      </div>
      <footer
        className="flex flex-wrap items-center gap-x-2 gap-y-1 border-t border-rule px-6 py-2 text-13 text-ink-2 max-rail:px-2"
        data-print="hide"
      >
        <Button variant="quiet" size="small" icon={Printer} onClick={() => window.print()}>
          Print
        </Button>
        <Button
          variant="quiet"
          size="small"
          icon={LogOut}
          pending={signOut.isPending}
          onClick={() => signOut.mutate(undefined, { onSettled: onSignedOut })}
        >
          Not now, sign out
        </Button>
        <span className="ml-auto px-2 max-rail:ml-0">
          We keep your name, the version and the time. A new version asks again.
        </span>
      </footer>
    </form>
  );
}
