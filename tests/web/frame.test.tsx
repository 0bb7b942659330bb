import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { Home, Layers } from 'lucide-react';
import { createMemoryRouter, RouterProvider, useLocation } from 'react-router-dom';
import { expect, it, vi } from 'vitest';
import { UnitsProvider, useUnits } from '../../web/lib/units.tsx';
import { Frame } from '../../web/ui/frame/frame.tsx';
import { Page } from '../../web/ui/page.tsx';

const ITEMS = [
  { to: '/', label: 'Home', icon: Home, exact: true },
  { to: '/portfolios', label: 'Portfolios', icon: Layers, alsoUnder: ['/editions'] },
];

function Gust() {
  const { gust, label } = useUnits();
  return (
    <p>
      {gust(50)} {label}
      <span data-testid="address">{useLocation().search}</span>
    </p>
  );
}

const show = (address: string, working: Parameters<typeof Frame>[0]['working'] = []) => {
  const onSignOut = vi.fn();
  const element = (
    <UnitsProvider personId="p1">
      <Frame
        organisation={{ name: 'Saltmarsh Mutual', initials: 'SM' }}
        person={{ name: 'Ines Halvard', role: 'Underwriter' }}
        work={ITEMS}
        model={[]}
        account={[]}
        working={working}
        readOnlyChip={null}
        onSignOut={onSignOut}
      >
        <Page title="Lodging 4471" crumbs={[{ label: 'Portfolios', to: '/portfolios' }, { label: 'Lodging 4471' }]}>
          <Gust />
        </Page>
      </Frame>
    </UnitsProvider>
  );
  render(<RouterProvider router={createMemoryRouter([{ path: '*', element }], { initialEntries: [address] })} />);
  return onSignOut;
};

it('lets the first Tab skip to the content', async () => {
  show('/');
  const user = userEvent.setup();
  await user.tab();
  expect(screen.getByRole('link', { name: 'Skip to content' })).toHaveFocus();
  await user.keyboard('{Enter}');
  expect(screen.getByRole('main')).toHaveFocus();
});

it('marks where one is, also on pages that belong to a section', () => {
  show('/editions/7');
  const rail = within(screen.getAllByRole('navigation', { name: 'Main' })[0]!);
  expect(rail.getByRole('link', { name: 'Portfolios' })).toHaveAttribute('aria-current', 'page');
  expect(rail.getByRole('link', { name: 'Home' })).not.toHaveAttribute('aria-current');
});

it('relabels gusts at once when the unit changes, and puts the unit into the address', async () => {
  show('/runs/7?tab=sites');
  expect(screen.getByText(/50\.0 m\/s/)).toBeVisible();
  const user = userEvent.setup();
  const bar = within(screen.getByRole('banner'));
  await user.click(bar.getByRole('radio', { name: 'mph' }));
  expect(screen.getByText(/111\.8 mph/)).toBeVisible();
  expect(screen.getByTestId('address')).toHaveTextContent('?tab=sites&unit=mph');
  await user.keyboard('{ArrowRight}');
  expect(screen.getByText(/180\.0 km\/h/)).toBeVisible();
});

it('keeps the unit of a person, and lets the one in a shared link win', () => {
  localStorage.setItem('gustloom.unit.p1', 'kt');
  show('/');
  expect(screen.getByText(/97\.2 kt/)).toBeVisible();
});
it('shows the unit of a shared link', () => {
  localStorage.setItem('gustloom.unit.p1', 'kt');
  show('/?unit=kmh');
  expect(screen.getByText(/180\.0 km\/h/)).toBeVisible();
});

it('lists up to three runs that work and counts the rest', () => {
  const run = (number: string) => ({ id: number, number, done: 1, total: 4, to: `/runs/${number}` });
  show('/', ['R-1', 'R-2', 'R-3', 'R-4', 'R-5'].map(run));
  const card = within(screen.getByRole('region', { name: 'Runs working' }));
  expect(card.getByText('5 runs working')).toBeVisible();
  expect(card.getAllByRole('link')).toHaveLength(3);
  expect(card.getByText('and 2 more')).toBeVisible();
});

it('carries the standing note on the page', () => {
  show('/');
  expect(screen.getByRole('contentinfo')).toHaveTextContent('not a forecast, a warning or a guide to evacuation');
});

it('signs out and changes the theme from the person’s menu, by keyboard', async () => {
  const onSignOut = show('/');
  const user = userEvent.setup();
  screen.getByRole('button', { name: /Ines Halvard/ }).focus();
  await user.keyboard('{Enter}');
  await user.click(await screen.findByRole('menuitem', { name: 'Dark theme' }));
  expect(document.documentElement.dataset.theme).toBe('dark');
  screen.getByRole('button', { name: /Ines Halvard/ }).focus();
  await user.keyboard('{Enter}');
  await user.click(await screen.findByRole('menuitem', { name: 'Sign out' }));
  expect(onSignOut).toHaveBeenCalledOnce();
});
