import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, expect, it, vi } from 'vitest';
import { SignInForm } from '../../web/features/session/components/sign-in-form.tsx';
import { safeNext, wishedUrl } from '../../web/features/session/guard.ts';
import { answerRequests, ok, refusal, testSession } from '../helpers/web-answers.ts';

beforeEach(() => vi.unstubAllGlobals());

const show = () => {
  const onSignedIn = vi.fn();
  render(
    <QueryClientProvider client={new QueryClient()}>
      <SignInForm onSignedIn={onSignedIn} />
    </QueryClientProvider>,
  );
  return onSignedIn;
};

it('signs in by keyboard alone', async () => {
  const asked = answerRequests(() => ok(testSession(), 201));
  const onSignedIn = show();
  const user = userEvent.setup();
  expect(screen.getByLabelText('E-mail')).toHaveFocus();
  await user.keyboard('ines@saltmarsh.example');
  await user.tab();
  await user.keyboard('harbour-wall-9{Enter}');
  await waitFor(() => expect(onSignedIn).toHaveBeenCalled());
  expect(asked[0]?.body).toEqual({ email: 'ines@saltmarsh.example', password: 'harbour-wall-9' });
});

it('says what is missing before it asks the service', async () => {
  const asked = answerRequests(() => ok(testSession(), 201));
  show();
  await userEvent.click(screen.getByRole('button', { name: 'Sign in' }));
  expect(await screen.findByText('Write your password.')).toBeVisible();
  expect(screen.getByLabelText('E-mail')).toHaveAccessibleDescription(/name@company.com/);
  expect(screen.getByLabelText('E-mail')).toBeInvalid();
  expect(asked).toEqual([]);
});

it('gives one message for a wrong pair and keeps what was typed', async () => {
  answerRequests(() => refusal(401, 'wrong_sign_in', 'E-mail and password don’t match.'));
  show();
  const user = userEvent.setup();
  await user.type(screen.getByLabelText('E-mail'), 'ines@saltmarsh.example');
  await user.type(screen.getByLabelText('Password'), 'wrong');
  await user.click(screen.getByRole('button', { name: 'Sign in' }));
  expect(await screen.findByRole('alert')).toHaveTextContent('E-mail and password don’t match.');
  expect(screen.getByLabelText('E-mail')).toHaveValue('ines@saltmarsh.example');
});

it('shows the password on request', async () => {
  show();
  await userEvent.click(screen.getByRole('button', { name: 'Show password' }));
  expect(screen.getByLabelText('Password')).toHaveAttribute('type', 'text');
});

it('keeps the wished address, and follows only addresses of ours', () => {
  expect(wishedUrl(new Request('http://localhost/runs/7?tab=sites&unit=kt'))).toBe('/runs/7?tab=sites&unit=kt');
  expect(wishedUrl(new Request('http://localhost/'))).toBeUndefined();
  expect(safeNext('/runs/7?tab=sites')).toBe('/runs/7?tab=sites');
  for (const foreign of ['https://elsewhere.example', '//elsewhere.example', '/\\elsewhere.example', null])
    expect(safeNext(foreign)).toBe('/');
});
