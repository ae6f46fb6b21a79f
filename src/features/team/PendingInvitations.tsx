import { errorText } from '../../api/client';
import { useInvitations, useWithdrawInvitation } from '../../api/team';
import { Message } from '../../components/Message';
import { ago, when } from '../../components/when';

/** Invitations nobody has answered yet; nothing at all when there are none. */
export function PendingInvitations() {
  const invitations = useInvitations(true);
  const withdraw = useWithdrawInvitation();
  if (!invitations.data?.length) return null;
  return (
    <section aria-labelledby="waiting-invitations">
      <h2 className="h2" id="waiting-invitations">
        Invitations waiting
      </h2>
      {withdraw.isError && <Message kind="fault">{errorText(withdraw.error)}</Message>}
      <table>
        <thead>
          <tr>
            <th>Name</th>
            <th>Role</th>
            <th className="wide-only">Invited</th>
            <th className="wide-only">Runs out</th>
            <th>
              <span className="vh">Withdraw</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {invitations.data?.map(({ id, name, email, role, invitedBy, createdAtMs, expiresAtMs }) => (
            <tr key={id}>
              <td className="who">
                <b>{name}</b>
                <span className="note">{email}</span>
              </td>
              <td>{role}</td>
              <td className="wide-only">
                {ago(createdAtMs)}, by {invitedBy}
              </td>
              <td className="wide-only">{when(expiresAtMs)}</td>
              <td className="act">
                <button
                  type="button"
                  className="btn sm"
                  aria-label={`Withdraw the invitation of ${name}`}
                  disabled={withdraw.isPending}
                  onClick={() => withdraw.mutate(id)}
                >
                  Withdraw
                </button>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}
