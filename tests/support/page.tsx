import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { render } from '@testing-library/react';
import type { ReactNode } from 'react';
import { createMemoryRouter, RouterProvider, useLocation } from 'react-router-dom';
import { vi } from 'vitest';
import type { Person, Problem } from '../../shared/api/resources';
import type { Role } from '../../shared/team/roles';

/** A request as the page made it. */
export interface Asked {
  method: string;
  path: string;
  body: unknown;
}
type Answer = { status?: number; body?: unknown } | Promise<{ status?: number; body?: unknown }>;

/**
 * The server, as far as a page sees it: what it answers by "METHOD /path" (below /api), and everything it was
 * asked. What is not listed is refused with 404, so that a page cannot pass by asking for something else.
 */
export function fakeServer(answers: Record<string, Answer | ((asked: Asked) => Answer)>): { asked: Asked[] } {
  const asked: Asked[] = [];
  vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
    const method = init.method ?? 'GET';
    const path = url.replace(/^\/api/, '');
    const call = { method, path, body: init.body ? JSON.parse(String(init.body)) : undefined };
    asked.push(call);
    const entry = answers[`${method} ${path}`] ?? {
      status: 404,
      body: problem(404, 'noSuchAddress', 'Nothing.'),
    };
    const { status = 200, body } = await (typeof entry === 'function' ? entry(call) : entry);
    return new Response(status === 204 ? null : JSON.stringify(body), {
      status,
      headers: { 'Content-Type': 'application/json' },
    });
  });
  return { asked };
}

export function problem(status: number, code: string, detail: string, errors?: Problem['errors']): Problem {
  return { type: 'about:blank', title: 'Refused', status, code, detail, ...(errors ? { errors } : {}) };
}

export function somebody(name: string, role: Role, change: Partial<Person> = {}): Person {
  const id = name.toLowerCase();
  return { id, name, email: `${id}@tidemill.example`, role, disabled: false, lastSeenMs: null, ...change };
}

export const sessionOf = (you: Person | null) => ({
  body: { setupNeeded: false, workshop: 'Tidemill Seed Library', demo: false, you },
});

/** Shows where the page led, for tests to read. */
function Here() {
  const { pathname, search } = useLocation();
  return <p data-testid="here">{`${pathname}${search}`}</p>;
}

/** Draws a page at an address; any other address shows where it is. */
export function showPage(page: ReactNode, { path, at = path }: { path: string; at?: string }) {
  const router = createMemoryRouter(
    [
      { path, element: page },
      { path: '*', element: <Here /> },
    ],
    { initialEntries: [at] },
  );
  const queries = new QueryClient({
    defaultOptions: {
      queries: { retry: false, networkMode: 'always' },
      mutations: { networkMode: 'always' },
    },
  });
  return render(
    <QueryClientProvider client={queries}>
      <RouterProvider router={router} />
    </QueryClientProvider>,
  );
}
