// @vitest-environment jsdom
import { screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { Component as FirstOwner } from '../../src/routes/FirstOwner';
import { Component as Invitation } from '../../src/routes/Invitation';
import { Component as SignIn } from '../../src/routes/SignIn';
import { type Asked, fakeServer, problem, sessionOf, showPage, somebody } from '../support/page';

afterEach(() => vi.unstubAllGlobals());

const signInAt = (at: string) => showPage(<SignIn />, { path: '/sign-in', at });
async function signInWith(email: string, password: string) {
  const person = userEvent.setup();
  await person.type(await screen.findByLabelText('E-mail'), email);
  if (password) await person.type(screen.getByLabelText('Password'), password);
  await person.click(screen.getByRole('button', { name: 'Sign in' }));
}

describe('signing in', () => {
  it('says beside the form what the server said, and waits in the password field', async () => {
    const refused = 'E-mail and password do not go together.';
    fakeServer({
      'GET /session': sessionOf(null),
      'POST /session': { status: 401, body: problem(401, 'wrongSignIn', refused) },
    });
    signInAt('/sign-in');
    await signInWith('ines@tidemill.example', 'not the one');
    expect(await screen.findByRole('alert')).toHaveTextContent(refused);
    expect(screen.getByLabelText('Password')).toHaveFocus();
    expect(screen.getByLabelText('E-mail')).toHaveValue('ines@tidemill.example');
  });

  it('says when the server does not answer', async () => {
    fakeServer({
      'GET /session': sessionOf(null),
      'POST /session': () => {
        throw new TypeError('Failed to fetch');
      },
    });
    signInAt('/sign-in');
    await signInWith('ines@tidemill.example', 'whatever it is');
    expect(await screen.findByRole('alert')).toHaveTextContent(/does not answer/);
  });

  it('asks for what is missing at its field, without asking the server', async () => {
    const { asked } = fakeServer({ 'GET /session': sessionOf(null) });
    signInAt('/sign-in');
    await signInWith('ines', '');
    const email = screen.getByLabelText('E-mail');
    await waitFor(() => expect(email).toBeInvalid());
    expect(email).toHaveAccessibleDescription(/like ines@tidemill.example/);
    expect(screen.getByLabelText('Password')).toHaveAccessibleDescription(/Type your password/);
    expect(asked.filter(({ method }) => method === 'POST')).toEqual([]);
  });

  it('goes back to the sheet that was wanted', async () => {
    const session = sessionOf(somebody('Ines', 'teacher'));
    fakeServer({ 'GET /session': sessionOf(null), 'POST /session': session });
    signInAt(`/sign-in?to=${encodeURIComponent('/arms/a1/poses')}`);
    await signInWith('ines@tidemill.example', 'the right one');
    expect(await screen.findByTestId('here')).toHaveTextContent('/arms/a1/poses');
  });

  it('does not follow an address that leads elsewhere', async () => {
    fakeServer({ 'GET /session': sessionOf(somebody('Ines', 'teacher')) });
    signInAt(`/sign-in?to=${encodeURIComponent('//evil.example/arms')}`);
    expect(await screen.findByTestId('here')).toHaveTextContent(/^\/$/);
  });

  it('leads to the first owner while there is none', async () => {
    fakeServer({ 'GET /session': { body: { setupNeeded: true, workshop: '', demo: false, you: null } } });
    signInAt('/sign-in');
    expect(await screen.findByTestId('here')).toHaveTextContent('/first-owner');
  });

  it('says where a demo keeps its sign-ins, and only there', async () => {
    fakeServer({ 'GET /session': { body: { setupNeeded: false, workshop: 'W', demo: true, you: null } } });
    const { unmount } = signInAt('/sign-in');
    expect(await screen.findByText(/printed in the terminal/)).toBeVisible();
    unmount();
    fakeServer({ 'GET /session': sessionOf(null) });
    signInAt('/sign-in');
    expect(await screen.findByText('Tidemill Seed Library', { selector: '.big' })).toBeVisible();
    expect(screen.queryByText(/printed in the terminal/)).toBeNull();
  });
});

describe('beginning as the first owner', () => {
  it('puts what the server says about the code beside the code', async () => {
    fakeServer({
      'GET /session': { body: { setupNeeded: true, workshop: '', demo: false, you: null } },
      'POST /setup': {
        status: 403,
        body: problem(403, 'wrongCode', 'That is not the code.', [
          { path: 'code', message: 'not the code the server printed' },
        ]),
      },
    });
    showPage(<FirstOwner />, { path: '/first-owner' });
    const person = userEvent.setup();
    await person.type(await screen.findByLabelText('One-time code'), 'abcd-1234');
    await person.type(screen.getByLabelText('Name of the workshop'), 'Shed');
    await person.type(screen.getByLabelText('Your name'), 'Ada');
    await person.type(screen.getByLabelText('E-mail'), 'ada@shed.example');
    await person.type(screen.getByLabelText('Password'), 'nine letters and more');
    await person.click(screen.getByRole('button', { name: 'Make me the owner' }));
    const code = screen.getByLabelText('One-time code');
    await waitFor(() => expect(code).toHaveAccessibleDescription('not the code the server printed'));
    expect(code).toHaveFocus();
  });
});

describe('accepting an invitation', () => {
  const token = 'Zk3-secret-of-the-invitation-0001';
  const invitationAt = (at: string) => showPage(<Invitation />, { path: '/invitation', at });

  it('sends the secret from behind the # with the new password', async () => {
    const { asked } = fakeServer({
      'GET /session': sessionOf(null),
      'POST /invitations/accept': { status: 201, ...sessionOf(somebody('Juno', 'operator')) },
    });
    invitationAt(`/invitation#${token}`);
    const person = userEvent.setup();
    await person.type(screen.getByLabelText('Password'), 'twelve herons');
    await person.click(screen.getByRole('button', { name: 'Join' }));
    expect(await screen.findByTestId('here')).toHaveTextContent(/^\/$/);
    expect(asked.find(({ method }) => method === 'POST')).toEqual<Asked>({
      method: 'POST',
      path: '/invitations/accept',
      body: { token, password: 'twelve herons' },
    });
  });

  it('asks for ten characters before it asks the server', async () => {
    const { asked } = fakeServer({ 'GET /session': sessionOf(null) });
    invitationAt(`/invitation#${token}`);
    const person = userEvent.setup();
    await person.type(screen.getByLabelText('Password'), 'nine long');
    await person.click(screen.getByRole('button', { name: 'Join' }));
    await waitFor(() =>
      expect(screen.getByLabelText('Password')).toHaveAccessibleDescription(/at least 10 characters/),
    );
    expect(asked.every(({ method }) => method === 'GET')).toBe(true);
  });

  it('says that a cut link is cut, and does not try it', async () => {
    fakeServer({ 'GET /session': sessionOf(null) });
    invitationAt('/invitation#Zk3');
    expect(screen.getByRole('alert')).toHaveTextContent(/not complete/);
    expect(screen.getByRole('button', { name: 'Join' })).toBeDisabled();
  });

  it('says that a used link is used', async () => {
    const gone = 'This invitation was used, withdrawn or has run out. Ask for a new one.';
    fakeServer({
      'GET /session': sessionOf(null),
      'POST /invitations/accept': { status: 410, body: problem(410, 'invitationGone', gone) },
    });
    invitationAt(`/invitation#${token}`);
    const person = userEvent.setup();
    await person.type(screen.getByLabelText('Password'), 'twelve herons');
    await person.click(screen.getByRole('button', { name: 'Join' }));
    expect(await screen.findByRole('alert')).toHaveTextContent(gone);
  });
});
