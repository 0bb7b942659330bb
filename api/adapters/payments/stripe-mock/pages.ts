import { TEST_CARDS } from './cards.ts';
import type { Session } from './sessions.ts';

const escape = (text: string) => text.replace(/[&<>"']/g, (mark) => `&#${mark.charCodeAt(0)};`);
const money = (minor: number, currency: string) =>
  `${currency.toUpperCase()} ${(minor / 100).toLocaleString('en-GB', { minimumFractionDigits: 2 })}`;

const page = (title: string, body: string) => `<!doctype html>
<html lang="en-GB">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>${escape(title)}</title>
<link rel="stylesheet" href="/pay.css">
</head>
<body>
<p class="band"><strong>Test payments.</strong> This page stands in for the card provider. No money moves.</p>
<main>
${body}
</main>
</body>
</html>`;

const summary = (session: Session, description: string) => `
<p class="what">${escape(description)}</p>
<p class="amount">${escape(money(session.amount_total, session.currency))}</p>
${session.customer_email ? `<p class="who">Receipt to ${escape(session.customer_email)}</p>` : ''}`;

/** Where a person chooses a test card. */
export const payPage = (session: Session, description: string, problem: string | null): string =>
  page(
    'Pay by card',
    `<h1>Pay by card</h1>
${summary(session, description)}
${problem ? `<p class="problem" role="alert"><strong>Not paid.</strong> ${escape(problem)} Choose another card or go back.</p>` : ''}
<form method="post" action="/pay/${escape(session.id)}">
<fieldset>
<legend>Test card</legend>
${TEST_CARDS.map(
  ({ number, label, says }, i) => `<label><input type="radio" name="card" value="${number}"${i === 0 ? ' checked' : ''}>
<span><span class="card">•••• ${label}</span> <span class="says">${escape(says)}</span></span></label>`,
).join('\n')}
</fieldset>
<button type="submit">Pay ${escape(money(session.amount_total, session.currency))}</button>
</form>
${session.cancel_url ? `<p><a href="${escape(session.cancel_url)}">Go back without paying</a></p>` : ''}`,
  );

/** The bank's question before a payment goes through. */
export const confirmPage = (session: Session, description: string): string =>
  page(
    'Confirm the payment',
    `<h1>Is this payment yours?</h1>
${summary(session, description)}
<p>The bank that issued the card asks before it pays.</p>
<form method="post" action="/pay/${escape(session.id)}/confirm">
<button type="submit" name="answer" value="yes">Yes, pay</button>
<button type="submit" name="answer" value="no" class="quiet">No, refuse</button>
</form>`,
  );

/** A page that can't take a payment any more. */
export const closedPage = (words: string, back: string | null): string =>
  page(
    'Nothing to pay',
    `<h1>Nothing to pay here</h1>
<p>${escape(words)}</p>
${back ? `<p><a href="${escape(back)}">Back to billing</a></p>` : ''}`,
  );
