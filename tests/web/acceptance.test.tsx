import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, expect, it, vi } from 'vitest';
import { NOTICE_THEMES } from '#contract/notices.ts';
import { AcceptanceSheet } from '../../web/features/session/components/acceptance-sheet.tsx';
import { answerRequests, ok, testSession } from '../helpers/web-answers.ts';

beforeEach(() => vi.unstubAllGlobals());

it('shows all six limits in full and records the version only after the tick', async () => {
  const session = testSession({ acceptanceRequired: '2026-12-01' });
  const asked = answerRequests(() => ok(testSession()));
  const onAccepted = vi.fn();
  render(
    <QueryClientProvider client={new QueryClient()}>
      <AcceptanceSheet session={session} onAccepted={onAccepted} onSignedOut={() => undefined} />
    </QueryClientProvider>,
  );
  for (const { text } of NOTICE_THEMES) expect(screen.getByText(text)).toBeVisible();
  const user = userEvent.setup();
  await user.click(screen.getByRole('button', { name: 'Accept and go on' }));
  expect(screen.getByText('Tick this when you have read them.')).toBeVisible();
  expect(asked).toEqual([]);
  await user.click(screen.getByRole('checkbox'));
  await user.click(screen.getByRole('button', { name: 'Accept and go on' }));
  await waitFor(() => expect(onAccepted).toHaveBeenCalled());
  expect(asked[0]?.body).toEqual({ version: '2026-12-01', name: 'Ines Halvard' });
});
