import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { ColumnsStep } from '../../web/features/portfolios/components/columns-step.tsx';
import {
  mappingWarnings,
  readExpectedRows,
  readExpectedTiv,
  startingForm,
} from '../../web/features/portfolios/mapping-form.ts';
import { answerRequests, ok } from '../helpers/web-answers.ts';
import { testEdition } from '../helpers/web-edition.ts';

beforeEach(() => vi.unstubAllGlobals());

const show = (canWrite = true) => {
  const onMapped = vi.fn();
  render(
    <QueryClientProvider client={new QueryClient()}>
      <ColumnsStep edition={testEdition()} canWrite={canWrite} onMapped={onMapped} />
    </QueryClientProvider>,
  );
  return onMapped;
};

describe('the mapping screen', () => {
  it('starts from the surest suggestion and never gives a field twice by itself', () => {
    show();
    expect(screen.getByLabelText('Field for Bldg')).toHaveDisplayValue('Building value');
    expect(screen.getByLabelText('Field for Bldg')).toHaveAccessibleDescription('sure');
    expect(screen.getByLabelText('Field for Building RC')).toHaveDisplayValue('Leave out');
  });

  it('shows three values of a column and names what is left out', () => {
    show();
    const columns = screen.getByRole('list', { name: 'Columns of the file' });
    for (const value of ['S-1', 'S-2', 'S-3']) expect(within(columns).getByText(new RegExp(`${value}$`))).toBeVisible();
    expect(screen.getByText('2 columns left out of the database:').parentElement).toHaveTextContent(
      'Building RC, Broker note.',
    );
  });

  it('refuses two columns for one field, naming both, and sends nothing', async () => {
    const asked = answerRequests(() => ok(testEdition(), 202));
    show();
    const user = userEvent.setup();
    await user.selectOptions(screen.getByLabelText('Field for Building RC'), 'Building value');
    await user.click(screen.getByRole('button', { name: 'Use this mapping' }));
    expect(await screen.findByRole('alert')).toHaveTextContent(
      'Two columns are mapped to building value: “Bldg” and “Building RC”. Choose one.',
    );
    expect(asked).toEqual([]);
  });

  it('sends the mapping with control totals in minor units', async () => {
    const asked = answerRequests(() => ok(testEdition({ state: 'checking' }), 202));
    const onMapped = show();
    const user = userEvent.setup();
    await user.type(screen.getByLabelText('Sites expected'), '1,953');
    await user.type(screen.getByLabelText('TIV expected'), '4,812,604,310.00');
    await user.click(screen.getByRole('button', { name: 'Use this mapping' }));
    await waitFor(() => expect(onMapped).toHaveBeenCalled());
    expect(asked[0]).toMatchObject({
      method: 'PUT',
      body: {
        columns: [
          { index: 0, field: 'site_ref' },
          { index: 1, field: 'latitude' },
          { index: 2, field: 'longitude' },
          { index: 3, field: 'building_value' },
        ],
        currency: 'USD',
        expectedRows: 1953,
        expectedTivMinor: 481_260_431_000,
      },
    });
  });

  it('keeps an auditor’s button in place, focusable, with the reason beside it', () => {
    show(false);
    const button = screen.getByRole('button', { name: 'Use this mapping' });
    expect(button).toHaveAttribute('aria-disabled', 'true');
    expect(button).toHaveAccessibleDescription('Auditors read only. Underwriters and modelers can map columns.');
    button.focus();
    expect(button).toHaveFocus();
  });
});

describe('what was typed', () => {
  it('is read with commas and spaces, and empty means not given', () => {
    expect(readExpectedRows('1 953')).toEqual({ value: 1953 });
    expect(readExpectedRows('')).toEqual({ value: null });
    expect(readExpectedRows('19.5').error).toBeDefined();
    expect(readExpectedTiv('1,204,500.5', 'USD')).toEqual({ value: 120_450_050 });
    expect(readExpectedTiv('1.2m', 'USD').error).toBeDefined();
  });

  it('warns where every row would be held', () => {
    const form = startingForm(testEdition());
    const withoutPlace = { ...form, fields: new Map([[0, 'site_ref' as const]]) };
    expect(mappingWarnings(form)).toHaveLength(1);
    expect(mappingWarnings(withoutPlace)).toEqual([
      'No column holds latitude and longitude. Every row will be held until it has a place.',
      'No column holds a value. Every row will be held: there is nothing to score.',
      'No policy terms are mapped. Gross will equal ground-up.',
    ]);
  });
});
