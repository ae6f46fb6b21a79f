import rateLimit, { ipKeyGenerator } from 'express-rate-limit';
import type { z } from 'zod';
import { AcceptInvitation, FirstOwner, SessionInfo, SignIn } from '../../shared/api/resources';
import { hashNewPassword } from '../auth/people-store';
import type { SignedIn } from '../auth/sessions';
import type { Context } from '../context';
import { HttpProblem } from './problem';
import { type Call, defineRoute, type Route } from './route';

function sessionInfo(context: Context, personId: string | null): z.input<typeof SessionInfo> {
  const { name, demo } = context.workshop.get();
  return {
    setupNeeded: !context.people.any(),
    workshop: name,
    demo,
    you: personId ? context.people.byId(personId) : null,
  };
}

function signInAs(call: Call<unknown, unknown, unknown>, personId: string): void {
  call.response.append('Set-Cookie', call.context.sessions.begin(personId, call.address));
}

/** Attempts in a sliding window of a minute, per address and per account; nobody learns which accounts exist. */
export function signInLimits(context: Context) {
  const limit = (most: number, keyOf: (call: { ip?: string; body?: { email?: unknown } }) => string) =>
    rateLimit({
      windowMs: 60_000,
      limit: most,
      standardHeaders: 'draft-8',
      legacyHeaders: false,
      keyGenerator: (request) => keyOf(request),
      handler: (_request, _response, next) =>
        next(new HttpProblem(429, 'tooOften', 'Too many attempts. Wait a minute, then try again.')),
    });
  const address = (call: { ip?: string }) => ipKeyGenerator(call.ip ?? '');
  return [
    limit(context.signInLimit.perAddress, (call) => address(call)),
    limit(
      context.signInLimit.perAccount,
      (call) => `account ${String(call.body?.email ?? address(call)).toLowerCase()}`,
    ),
  ];
}

export const sessionRoutes: Route[] = [
  defineRoute({
    method: 'get',
    path: '/session',
    needs: 'anyone',
    summary: 'Who is signed in here, and whether the workshop still needs its first owner',
    response: SessionInfo,
    handle: ({ context, visitor }: { context: Context; visitor: SignedIn | null }) =>
      sessionInfo(context, visitor?.person.id ?? null),
  }),
  defineRoute({
    method: 'post',
    path: '/session',
    needs: 'anyone',
    summary: 'Sign in',
    body: SignIn,
    response: SessionInfo,
    async handle(call) {
      const { context, body, address } = call;
      const person = await context.people.check(body.email, body.password);
      context.audit.append({
        who: person?.name ?? body.email,
        act: 'session.signIn',
        result: person ? 'done' : 'refused',
        address,
      });
      if (!person) throw new HttpProblem(401, 'wrongSignIn', 'E-mail and password do not go together.');
      signInAs(call, person.id);
      return sessionInfo(context, person.id);
    },
  }),
  defineRoute({
    method: 'delete',
    path: '/session',
    needs: 'signedIn',
    summary: 'Sign out: ends all sessions of this person, on every device',
    response: null,
    handle({ context, you, response, address }) {
      context.sessions.endAllOf(you.person.id);
      response.append('Set-Cookie', context.sessions.farewellCookie());
      context.audit.append({ who: you.person.name, act: 'session.signOut', address });
    },
  }),
  defineRoute({
    method: 'post',
    path: '/setup',
    needs: 'anyone',
    summary: 'Make the first owner with the one-time code that the server printed',
    body: FirstOwner,
    response: SessionInfo,
    status: 201,
    async handle(call) {
      const { context, body, address } = call;
      if (context.people.any())
        throw new HttpProblem(409, 'setUpAlready', 'This workshop has an owner already. Sign in.');
      if (!context.setupCode.fits(body.code))
        throw new HttpProblem(403, 'wrongCode', 'That is not the code the server printed when it started.', [
          { path: 'code', message: 'not the code the server printed' },
        ]);
      const { name, email } = body;
      const passwordHash = await hashNewPassword(body.password, email);
      // Hashing takes a while: of two people with the code, the first through here is the owner.
      const person = context.db.transaction(() => {
        if (context.people.any())
          throw new HttpProblem(409, 'setUpAlready', 'This workshop has an owner already. Sign in.');
        context.workshop.set(body.workshop, false);
        return context.people.add({ name, email, passwordHash, role: 'owner' });
      });
      context.setupCode.spend();
      context.audit.append({ who: person.name, act: 'setup', address });
      signInAs(call, person.id);
      return sessionInfo(context, person.id);
    },
  }),
  defineRoute({
    method: 'post',
    path: '/invitations/accept',
    needs: 'anyone',
    summary: 'Join with the secret of an invitation',
    body: AcceptInvitation,
    response: SessionInfo,
    status: 201,
    async handle(call) {
      const { context, body, address } = call;
      const passwordHash = await hashNewPassword(body.password, context.invitations.look(body.token).email);
      const person = context.db.transaction(() => {
        const { email, name, role } = context.invitations.redeem(body.token);
        return context.people.add({ email, name, role, passwordHash });
      });
      context.audit.append({ who: person.name, act: 'invitation.accept', detail: person.role, address });
      signInAs(call, person.id);
      return sessionInfo(context, person.id);
    },
  }),
];
