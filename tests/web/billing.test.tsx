import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import type { TopUp } from '#contract/billing.ts';
import { BalanceCard } from '../../web/features/billing/components/balance-card.tsx';
import { TopUpDialog } from '../../web/features/billing/components/top-up-dialog.tsx';
import { TopUpReturn } from '../../web/features/billing/components/top-up-return.tsx';
import { minorFrom } from '../../web/features/billing/top-up-amount.ts';
import { answerRequests, ok } from '../helpers/web-answers.ts';

const topUp = (changes: Partial<TopUp> = {}): TopUp => ({
  id: '00000000-0000-4000-8000-000000000041',
  amountMinor: 25_000,
  currency: 'USD',
  state: 'pending',
  reason: null,
  checkoutUrl: 'http://localhost/pay/1',
  createdAt: new Date().toISOString(),
  ...changes,
});
const inClient = (element: React.ReactNode) =>
  render(
    <QueryClientProvider client={new QueryClient({ defaultOptions: { queries: { retry: false } } })}>
      {element}
    </QueryClientProvider>,
  );

describe('amounts', () => {
  it.each([
    ['250', 25_000],
    ['1,250.5', 125_050],
    ['0.01', 1],
    ['12.345', null],
    ['-5', null],
    ['ten', null],
  ])('reads %s exactly', (text, minor) => {
    expect(minorFrom(text, 'USD')).toBe(minor);
  });
  it('knows currencies without cents', () => {
    expect(minorFrom('5000', 'JPY')).toBe(5000);
    expect(minorFrom('5000.5', 'JPY')).toBeNull();
  });
});

it('draws free as balance less reserved', () => {
  render(
    <BalanceCard
      balance={{
        balanceMinor: 140_200,
        reservedMinor: 11_763,
        freeMinor: 128_437,
        currency: 'USD',
        month: { label: 'December 2026', chargedMinor: 84_612, runs: 9 },
      }}
    />,
  );
  expect(screen.getByRole('region', { name: 'Free to spend' })).toHaveTextContent(
    'USD1,284.37=1,402.00balance−117.63reserved',
  );
});

describe('a top-up', () => {
  it('leaves for the provider’s page, one key for one amount', async () => {
    const asked = answerRequests(() => ok(topUp(), 201));
    const onLeave = vi.fn();
    inClient(<TopUpDialog currency="USD" onClose={() => undefined} onLeave={onLeave} />);
    await userEvent.click(await screen.findByRole('button', { name: 'Pay USD 250.00' }));
    await vi.waitFor(() => expect(onLeave).toHaveBeenCalledWith('http://localhost/pay/1'));
    expect(asked[0]).toMatchObject({ method: 'POST', path: '/billing/top-ups', body: { amountMinor: 25_000 } });
    expect(asked[0]!.headers.get('idempotency-key')).toMatch(/^[0-9a-f-]{36}$/);
  });
  it('refuses an amount below the smallest before asking', async () => {
    const asked = answerRequests(() => ok(topUp(), 201));
    inClient(<TopUpDialog currency="USD" onClose={() => undefined} onLeave={() => undefined} />);
    const amount = await screen.findByLabelText('Amount');
    await userEvent.clear(amount);
    await userEvent.type(amount, '5');
    await userEvent.click(screen.getByRole('button', { name: 'Pay' }));
    expect(screen.getByText('The smallest top-up is USD 10.00.')).toBeVisible();
    expect(asked).toHaveLength(0);
  });
});

describe('coming back from the provider', () => {
  const back = (state: Partial<TopUp>, left = false) => {
    answerRequests(() => ok(topUp(state)));
    inClient(<TopUpReturn topUpId={topUp().id} left={left} onTryAgain={() => undefined} onDone={() => undefined} />);
  };
  it('waits for the provider’s own message', async () => {
    back({});
    expect(await screen.findByText('Waiting for the provider to confirm USD 250.00')).toBeVisible();
  });
  it('says what was credited', async () => {
    back({ state: 'succeeded' });
    expect(await screen.findByText('USD 250.00 credited')).toBeVisible();
  });
  it('says why it was declined and what stays usable', async () => {
    back({ state: 'declined', reason: 'the card has insufficient funds.' });
    expect(await screen.findByText(/declined it: the card has insufficient funds\./)).toBeVisible();
    expect(screen.getByText(/results stay\s+readable/)).toBeVisible();
    expect(screen.getByRole('button', { name: 'Try another card' })).toBeVisible();
  });
  it('knows that the page was left without paying', async () => {
    back({}, true);
    expect(await screen.findByText('You came back without paying')).toBeVisible();
  });
});
