import { Printer } from 'lucide-react';
import { Link } from 'react-router-dom';
import { NOTICE_THEMES, NOTICE_VERSION } from '#contract/notices.ts';
import { READERS } from '#contract/roles.ts';
import { NOTICE_ICONS } from '../features/session/notice-icons.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { day } from '../lib/dates.ts';
import { paths } from '../paths.ts';
import { Button } from '../ui/button.tsx';
import { Card } from '../ui/card.tsx';
import { Page } from '../ui/page.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

const NOT_MODELLED = [
  'Storm surge, waves and inland flood',
  'Rain entering through openings that the wind left intact',
  'Tornado outbreaks away from the eyewall',
  'Demand surge and the cost of adjusting claims',
  'Legal questions of coverage, and whether a deductible is triggered',
];

export function Component() {
  const session = useSession();
  return (
    <Page
      title="Limits of use"
      crumbs={[{ label: 'Limits of use' }]}
      sub={
        <span>
          Version of <b>{day(NOTICE_VERSION)}</b>. The same text travels with every reply, file and printed page.
        </span>
      }
      actions={
        <Button icon={Printer} onClick={() => window.print()} data-print="hide">
          Print
        </Button>
      }
    >
      <div className="grid grid-cols-[220px_minmax(0,1fr)] items-start gap-8 max-wide:grid-cols-1">
        <nav aria-label="Contents" className="sticky top-0 max-wide:hidden" data-print="hide">
          <ol className="border-l border-rule text-13">
            {[
              ...NOTICE_THEMES.map(({ code, title }) => ({ code: code as string, title: title as string })),
              { code: 'not-modelled', title: 'What isn’t modelled' },
            ].map(({ code, title }) => (
              <li key={code}>
                <a
                  href={`#${code}`}
                  className="-ml-px block border-l-2 border-transparent py-1.5 pl-3.5 text-ink-2 no-underline hover:border-ink-2 hover:text-ink"
                >
                  {title}
                </a>
              </li>
            ))}
          </ol>
        </nav>
        <Card padded={false} className="max-w-200">
          {NOTICE_THEMES.map(({ code, title, text }, index) => {
            const Icon = NOTICE_ICONS[code];
            return (
              <section
                key={code}
                id={code}
                className="scroll-mt-2 border-t border-rule px-8 py-5 first:border-t-0 max-rail:px-4"
              >
                <h2 className="mb-1.5 flex items-center gap-2.5 text-18">
                  <Icon size={19} strokeWidth={1.75} className="text-action" aria-hidden />
                  {index + 1}. {title}
                </h2>
                <p className="max-w-[68ch] pl-7.25 text-16 max-rail:pl-0">{text}</p>
              </section>
            );
          })}
          <section
            id="not-modelled"
            className="scroll-mt-2 rounded-b-3 border-t border-rule-strong bg-well px-8 py-5 max-rail:px-4"
          >
            <h2 className="mb-1.5 text-18">What isn’t modelled</h2>
            <ul className="list-disc pl-5 text-16">
              {NOT_MODELLED.map((item) => (
                <li key={item} className="py-0.5">
                  {item}
                </li>
              ))}
            </ul>
            {holdsOneOf(session, READERS) && (
              <p className="mt-3 text-16">
                How modelled gusts compare with observed ones in past storms, good and bad:{' '}
                <Link to={paths.validation()} className="underline">
                  Validation
                </Link>
                .
              </p>
            )}
          </section>
        </Card>
      </div>
    </Page>
  );
}
