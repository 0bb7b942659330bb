import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it, vi } from 'vitest';
import type { Quote } from '#contract/runs.ts';
import { QuoteCard, standingOf, type QuoteStanding } from '../../web/features/runs/components/quote-card.tsx';
import { isSameRequest, openChoice, requestOf, setupOf } from '../../web/features/runs/run-setup.ts';
import { testQuote } from '../helpers/web-run.ts';

const show = (quote: Quote | null, standing: QuoteStanding | null, open: string | null = null) => {
  const onAccept = vi.fn();
  const onQuote = vi.fn();
  render(
    <MemoryRouter>
      <QuoteCard
        quote={quote}
        standing={standing}
        openChoice={open}
        quoting={false}
        accepting={false}
        quoteError={null}
        acceptError={null}
        onQuote={onQuote}
        onAccept={onAccept}
      />
    </MemoryRouter>,
  );
  return { onAccept, onQuote };
};

describe('where a quote stands', () => {
  const before = new Date('2026-12-19T08:43:59Z');
  const after = new Date('2026-12-19T08:44:00Z');
  it('is open until its last second and only for its very inputs', () => {
    expect(standingOf(testQuote(), true, before)).toBe('open');
    expect(standingOf(testQuote(), false, before)).toBe('changed');
    expect(standingOf(testQuote(), true, after)).toBe('expired');
    expect(standingOf(testQuote({ state: 'accepted' }), true, before)).toBe('accepted');
  });
  it('changes with any choice but not with the order of tracks', () => {
    const { request } = testQuote();
    const two = { ...request, scenarioVersionIds: ['a', 'b'] };
    expect(isSameRequest(two, { ...two, scenarioVersionIds: ['b', 'a'] })).toBe(true);
    expect(isSameRequest(request, { ...request, options: { ...request.options, intensity: 'wind' } })).toBe(false);
    expect(isSameRequest(request, { ...request, purpose: 'exploratory' })).toBe(false);
    expect(isSameRequest(request, { ...request, costCentre: 'Treaty' })).toBe(false);
  });
  it('isn’t asked for while a choice is open', () => {
    const setup = { ...setupOf(testQuote().request), scenarioVersionIds: [] };
    expect(requestOf(setup)).toBeNull();
    expect(openChoice(setup)).toBe('Choose at least one track.');
  });
});

describe('the quote card', () => {
  it('prints the receipt, the balance after and the price on the button', async () => {
    const { onAccept } = show(testQuote(), 'open');
    const receipt = ['1,840', '× 3', '5,520', '− 0', '0.004', '22.08', '1.55', '1,425.63', '1,402.00'];
    for (const figure of receipt) expect(screen.getAllByText(figure).length).toBeGreaterThan(0);
    await userEvent.click(screen.getByRole('button', { name: 'Accept and run USD 23.63' }));
    expect(onAccept).toHaveBeenCalledOnce();
  });
  it.each([
    ['changed', /some have changed/],
    ['expired', /was valid until 19 Dec 2026 08:44 UTC/],
  ] as const)('offers to quote again when it is %s', async (standing, why) => {
    const { onQuote, onAccept } = show(testQuote(), standing);
    expect(screen.queryByRole('button', { name: /Accept/ })).not.toBeInTheDocument();
    expect(screen.getByText(why)).toBeVisible();
    await userEvent.click(screen.getByRole('button', { name: 'Quote again' }));
    expect(onQuote).toHaveBeenCalledOnce();
    expect(onAccept).not.toHaveBeenCalled();
  });
  it('offers an identical run free, above the price', () => {
    show(testQuote({ identicalRunId: '00000000-0000-4000-8000-000000000099' }), 'open');
    expect(screen.getByRole('link', { name: 'Open it, free' })).toHaveAttribute(
      'href',
      '/runs/00000000-0000-4000-8000-000000000099',
    );
  });
  it('says how much is missing instead of accepting beyond the balance', async () => {
    const { onAccept } = show(testQuote({ freeBalanceMinor: 2000 }), 'open');
    const accept = screen.getByRole('button', { name: /Accept and run/ });
    expect(accept).toHaveAttribute('aria-disabled', 'true');
    expect(accept).toHaveAccessibleDescription(/USD 3\.63 short/);
    await userEvent.click(accept);
    expect(onAccept).not.toHaveBeenCalled();
  });
});
