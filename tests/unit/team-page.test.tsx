// @vitest-environment jsdom
import { screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { Component as Outbox } from '../../src/routes/Outbox';
import { Component as Team } from '../../src/routes/Team';
import { fakeServer, problem, sessionOf, showPage, somebody } from '../support/page';

afterEach(() => vi.unstubAllGlobals());

const ada = somebody('Ada', 'owner');
const juno = somebody('Juno', 'operator');
const team = { 'GET /people': { body: [ada, juno] }, 'GET /invitations': { body: [] } };
const teamAs = (you: typeof ada, more: Parameters<typeof fakeServer>[0] = {}) => {
  const server = fakeServer({ 'GET /session': sessionOf(you), ...team, ...more });
  showPage(<Team />, { path: '/team' });
  return server;
};
const roleButton = (name: string) => screen.findByRole('button', { name: new RegExp(`^Role of ${name}`) });

describe('the team as its owner sees it', () => {
  it('gives a role after asking', async () => {
    const { asked } = teamAs(ada, { 'PATCH /people/juno': { body: { ...juno, role: 'teacher' } } });
    const person = userEvent.setup();
    await person.click(await roleButton('Juno'));
    const dialog = screen.getByRole('dialog', { name: 'Role of Juno' });
    expect(within(dialog).getByRole('radio', { name: /^operator/ })).toBeChecked();
    await person.click(within(dialog).getByRole('radio', { name: /^teacher/ }));
    expect(asked.some(({ method }) => method === 'PATCH')).toBe(false);
    await person.click(within(dialog).getByRole('button', { name: 'Make Juno teacher' }));
    await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull());
    expect(asked.filter(({ method }) => method === 'PATCH')).toEqual([
      { method: 'PATCH', path: '/people/juno', body: { role: 'teacher' } },
    ]);
  });

  it('offers the only owner no other role, and says why', async () => {
    teamAs(ada);
    const person = userEvent.setup();
    await person.click(await roleButton('Ada'));
    const dialog = screen.getByRole('dialog', { name: 'Role of Ada' });
    for (const role of ['observer', 'operator', 'teacher', 'builder']) {
      const option = within(dialog).getByRole('radio', { name: new RegExp(`^${role}`) });
      expect(option).toBeDisabled();
      expect(option).toHaveAccessibleName(/only owner/);
    }
    expect(screen.queryByRole('button', { name: 'Disable Ada' })).toBeNull();
  });

  it('keeps the question open with the reason when the server refuses', async () => {
    const refused = 'A workshop needs an owner. Make somebody else owner first.';
    teamAs(ada, { 'PATCH /people/juno': { status: 409, body: problem(409, 'lastOwner', refused) } });
    const person = userEvent.setup();
    await person.click(await screen.findByRole('button', { name: 'Disable Juno' }));
    await person.click(within(screen.getByRole('dialog')).getByRole('button', { name: 'Disable Juno' }));
    expect(await within(screen.getByRole('dialog')).findByRole('alert')).toHaveTextContent(refused);
  });

  it('stays on the page, called old, when it cannot be fetched again after a change', async () => {
    let fetches = 0;
    teamAs(ada, {
      'GET /people': () => {
        fetches += 1;
        if (fetches > 1) throw new TypeError('Failed to fetch');
        return { body: [ada, juno] };
      },
      'PATCH /people/juno': { body: { ...juno, disabled: true } },
    });
    const person = userEvent.setup();
    await person.click(await screen.findByRole('button', { name: 'Disable Juno' }));
    await person.click(within(screen.getByRole('dialog')).getByRole('button', { name: 'Disable Juno' }));
    expect(await screen.findByText(/does not answer.*What is shown is from before/)).toBeVisible();
    expect(screen.getByRole('cell', { name: /Juno/ })).toBeVisible();
  });

  it('invites, and says where the link waits', async () => {
    const { asked } = teamAs(ada, {
      'POST /invitations': ({ body }) => ({
        status: 201,
        body: { id: 'i1', ...(body as object), invitedBy: 'Ada', createdAtMs: 0, expiresAtMs: 1 },
      }),
    });
    const person = userEvent.setup();
    await person.click(await screen.findByRole('button', { name: 'Invite somebody…' }));
    await person.type(screen.getByLabelText('Name'), 'Nell');
    await person.type(screen.getByLabelText('E-mail'), 'nell@tidemill.example');
    await person.selectOptions(screen.getByLabelText('Role'), 'observer');
    await person.click(screen.getByRole('button', { name: 'Send invitation' }));
    expect(await screen.findByText(/Nell is invited/)).toBeVisible();
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({
      name: 'Nell',
      email: 'nell@tidemill.example',
      role: 'observer',
    });
  });
});

describe('the team as anybody else sees it', () => {
  it('shows the roles and offers to change none', async () => {
    const { asked } = teamAs(juno);
    expect(await screen.findByRole('cell', { name: /Ada/ })).toBeVisible();
    expect(screen.queryByRole('button', { name: /Role of|Disable|Invite/ })).toBeNull();
    expect(asked.some(({ path }) => path === '/invitations')).toBe(false);
  });
});

describe('the outbox', () => {
  const link = 'http://localhost:4310/invitation#Zk3-secret-of-the-invitation-0001';
  const mail = {
    id: 'm1',
    to: 'nell@tidemill.example',
    subject: 'Ada invites you',
    body: `Hello Nell,\n\nOpen this link:\n${link}\n`,
    createdAtMs: 0,
    sent: false,
  };

  it('is for the owner, and says whom to ask', async () => {
    const { asked } = fakeServer({ 'GET /session': sessionOf(juno), 'GET /people': { body: [ada, juno] } });
    showPage(<Outbox />, { path: '/outbox' });
    expect(await screen.findByText(/for the owner\. Your role is operator\. Ask Ada\./)).toBeVisible();
    expect(asked.some(({ path }) => path === '/outbox')).toBe(false);
  });

  it('copies the link of a mail that was not sent', async () => {
    fakeServer({ 'GET /session': sessionOf(ada), 'GET /outbox': { body: [mail] } });
    showPage(<Outbox />, { path: '/outbox' });
    const person = userEvent.setup();
    const card = await screen.findByRole('article', { name: /Ada invites you/ });
    expect(card).toHaveTextContent('not sent');
    await person.click(within(card).getByRole('button', { name: 'Copy the link' }));
    expect(await navigator.clipboard.readText()).toBe(link);
  });

  it('selects the link for copying by hand where the browser allows no copying', async () => {
    fakeServer({ 'GET /session': sessionOf(ada), 'GET /outbox': { body: [mail] } });
    showPage(<Outbox />, { path: '/outbox' });
    const person = userEvent.setup();
    Object.defineProperty(navigator, 'clipboard', { value: undefined, configurable: true });
    await person.click(await screen.findByRole('button', { name: 'Copy the link' }));
    const field = screen.getByLabelText<HTMLInputElement>('Link in the mail');
    expect(await screen.findByText(/Selected/)).toBeVisible();
    expect(field.value.slice(field.selectionStart ?? 0, field.selectionEnd ?? 0)).toBe(link);
  });

  it('says that there are no mails', async () => {
    fakeServer({ 'GET /session': sessionOf(ada), 'GET /outbox': { body: [] } });
    showPage(<Outbox />, { path: '/outbox' });
    expect(await screen.findByText(/No mails yet/)).toBeVisible();
  });
});
