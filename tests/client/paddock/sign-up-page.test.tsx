import { QueryClientProvider } from '@tanstack/react-query';
import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { CAUTIONS } from '#shared/cautions.ts';
import { SignUpPage } from '#src/paddock/account/sign-up-page.tsx';
import { createQueryClient } from '#src/paddock/cache/query-client.ts';
import { sampleMe } from './sample-answers.ts';

function open(fetch: typeof globalThis.fetch) {
  vi.stubGlobal('fetch', fetch);
  const router = createMemoryRouter(
    [
      { path: '/sign-up', element: <SignUpPage /> },
      { path: '/event', element: <p>the event page</p> },
    ],
    {
      initialEntries: ['/sign-up'],
    },
  );
  render(
    <QueryClientProvider client={createQueryClient()}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
}

async function fill() {
  const person = userEvent.setup();
  await person.type(screen.getByLabelText('your name'), 'Nora Tell');
  await person.type(screen.getByLabelText('team'), 'Oxbow');
  await person.type(screen.getByLabelText('email'), 'nora@oxbow.example');
  await person.type(screen.getByLabelText('password'), 'a level pool of time');
  return person;
}

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

describe('sign-up', () => {
  it('shows every caution and sends nothing until they are acknowledged', async () => {
    const fetch = vi.fn(async () => Response.json(sampleMe));
    open(fetch);
    for (const { text } of CAUTIONS) expect(screen.getByText(text)).toBeDefined();
    const person = await fill();
    await person.click(screen.getByRole('button', { name: 'sign up' }));
    expect(await screen.findByText('Read the cautions and tick the box to go on.')).toBeDefined();
    expect(fetch).not.toHaveBeenCalled();

    await person.click(screen.getByRole('checkbox'));
    await person.click(screen.getByRole('button', { name: 'sign up' }));
    expect(await screen.findByText('the event page')).toBeDefined();
    const [, init] = fetch.mock.calls[0] as unknown as [string, RequestInit];
    expect(JSON.parse(String(init.body))).toEqual({
      name: 'Nora Tell',
      teamName: 'Oxbow',
      email: 'nora@oxbow.example',
      password: 'a level pool of time',
    });
  });

  it('keeps what was typed when the server refuses, and says why', async () => {
    open(async () =>
      Response.json({ code: 'EMAIL_TAKEN', message: 'Somebody signed up with this address.', requestId: 'r-3' }, { status: 409 }),
    );
    const person = await fill();
    await person.click(screen.getByRole('checkbox'));
    await person.click(screen.getByRole('button', { name: 'sign up' }));
    expect(await screen.findByText('Somebody signed up with this address.')).toBeDefined();
    expect((screen.getByLabelText('email') as HTMLInputElement).value).toBe('nora@oxbow.example');
  });
});
