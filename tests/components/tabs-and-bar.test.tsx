import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { expect, test } from 'vitest';
import { BarContents, BarNav, WithBar } from '../../src/components/bar.tsx';
import { TabPanel, Tabs } from '../../src/components/tabs.tsx';

test('arrow keys go from tab to tab and show what belongs to them', async () => {
  function Drawer() {
    const [tab, setTab] = useState('findings');
    return (
      <Tabs
        label="Results"
        tabs={[
          { value: 'findings', label: 'Findings', count: 5 },
          { value: 'outline', label: 'Outline' },
        ]}
        value={tab}
        onChange={setTab}
      >
        <TabPanel value="findings">five findings</TabPanel>
        <TabPanel value="outline">the outline</TabPanel>
      </Tabs>
    );
  }
  render(<Drawer />);
  expect(screen.getByRole('tab', { name: 'Findings 5' })).toHaveAttribute('aria-selected', 'true');
  await userEvent.tab();
  await userEvent.keyboard('{ArrowRight}');
  expect(screen.getByText('the outline')).toBeVisible();
  expect(screen.queryByText('five findings')).not.toBeInTheDocument();
});

test('a page fills the middle of the bar, and the place where the reader is is marked', () => {
  const page = (
    <WithBar end="account">
      <BarContents>
        <BarNav
          label="Main"
          destinations={[
            { to: '/here', label: 'Here' },
            { to: '/there', label: 'There' },
          ]}
        />
      </BarContents>
    </WithBar>
  );
  render(
    <RouterProvider
      router={createMemoryRouter([{ path: '*', element: page }], { initialEntries: ['/here'] })}
    />,
  );
  expect(screen.getByRole('banner')).toContainElement(screen.getByRole('navigation', { name: 'Main' }));
  expect(screen.getByRole('link', { name: 'Here' })).toHaveAttribute('aria-current', 'page');
  expect(screen.getByRole('link', { name: 'There' })).not.toHaveAttribute('aria-current');
});
