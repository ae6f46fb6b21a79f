import { z } from 'zod';
import {
  AuditEntry,
  Id,
  Invitation,
  Mail,
  NewInvitation,
  Person,
  PersonChange,
} from '../../shared/api/resources';
import { defineRoute, type Route } from './route';

/** A change of a person as the audit log says it: "role teacher, disabled". */
function changeWords({ role, disabled }: z.infer<typeof PersonChange>): string {
  const words = role ? [`role ${role}`] : [];
  if (disabled !== undefined) words.push(disabled ? 'disabled' : 'let in again');
  return words.join(', ') || 'nothing';
}

const WorkshopName = z.strictObject({ name: z.string().trim().min(1).max(60) });

export const teamRoutes: Route[] = [
  defineRoute({
    method: 'get',
    path: '/people',
    needs: 'team.see',
    summary: 'Everybody on the team',
    response: z.array(Person),
    handle: ({ context }) => context.people.list(),
  }),
  defineRoute({
    method: 'patch',
    path: '/people/:personId',
    needs: 'team.manage',
    summary: 'Change a role, or disable somebody; ends their sessions',
    params: z.object({ personId: Id }),
    body: PersonChange,
    response: Person,
    handle({ context, params, body, you, address }) {
      const { person, changed } = context.people.change(params.personId, body);
      if (!changed) return person;
      // One's own as well: an open socket carries the role it was opened with.
      context.sessions.endAllOf(person.id);
      context.audit.append({
        who: you.person.name,
        act: 'person.change',
        detail: `${person.name}: ${changeWords(body)}`,
        address,
      });
      return person;
    },
  }),
  defineRoute({
    method: 'get',
    path: '/invitations',
    needs: 'team.manage',
    summary: 'Invitations that wait for an answer',
    response: z.array(Invitation),
    handle: ({ context }) => context.invitations.pending(),
  }),
  defineRoute({
    method: 'post',
    path: '/invitations',
    needs: 'team.manage',
    summary: 'Invite somebody by e-mail',
    body: NewInvitation,
    response: Invitation,
    status: 201,
    async handle({ context, body, you, address }) {
      context.people.refuseTaken(body.email);
      const { invitation, token } = context.invitations.make(body, you.person);
      const workshop = context.workshop.get().name;
      // The secret stands in the fragment, which browsers do not send to any server.
      const link = `${context.publicUrl()}/invitation#${token}`;
      await context.mailer.send({
        to: invitation.email,
        subject: `${you.person.name} invites you to ${workshop}`,
        body: `Hello ${invitation.name},\n\n${you.person.name} invites you to ${workshop} on Elbowroom, as ${invitation.role}.\n\nOpen this link within seven days and choose a password. It works once:\n${link}\n`,
        secret: token,
      });
      context.audit.append({
        who: you.person.name,
        act: 'invitation.make',
        detail: `${invitation.email} as ${invitation.role}`,
        address,
      });
      return invitation;
    },
  }),
  defineRoute({
    method: 'delete',
    path: '/invitations/:invitationId',
    needs: 'team.manage',
    summary: 'Withdraw an invitation',
    params: z.object({ invitationId: Id }),
    response: null,
    handle({ context, params, you, address }) {
      context.invitations.withdraw(params.invitationId);
      context.audit.append({ who: you.person.name, act: 'invitation.withdraw', address });
    },
  }),
  defineRoute({
    method: 'get',
    path: '/outbox',
    needs: 'outbox.see',
    summary: 'Mails, newest first; unsent ones wait here',
    response: z.array(Mail),
    handle: ({ context }) => context.mailer.list(),
  }),
  defineRoute({
    method: 'get',
    path: '/audit',
    needs: 'audit.see',
    summary: 'Who did what, a hundred entries at a time, newest first',
    query: z.object({ before: z.coerce.number().int().positive().optional() }),
    response: z.array(AuditEntry),
    handle: ({ context, query }) => context.audit.page(query.before),
  }),
  defineRoute({
    method: 'get',
    path: '/workshop',
    needs: 'team.see',
    summary: 'The workshop',
    response: z.object({ name: z.string() }),
    handle: ({ context }) => ({ name: context.workshop.get().name }),
  }),
  defineRoute({
    method: 'patch',
    path: '/workshop',
    needs: 'workshop.settings',
    summary: 'Rename the workshop',
    body: WorkshopName,
    response: z.object({ name: z.string() }),
    handle({ context, body, you, address }) {
      context.workshop.rename(body.name);
      context.audit.append({ who: you.person.name, act: 'workshop.rename', detail: body.name, address });
      return { name: body.name };
    },
  }),
];
