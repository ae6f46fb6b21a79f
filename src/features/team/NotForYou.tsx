import { PERMISSIONS, type Permission } from '../../../shared/team/roles';
import { useSession } from '../../api/session';
import { usePeople } from '../../api/team';

/** In the place of a sheet that this role does not open: who does, and whom to ask. */
export function NotForYou({ title, needs }: { title: string; needs: Permission }) {
  const you = useSession().data?.you;
  const people = usePeople().data ?? [];
  const least = PERMISSIONS[needs];
  const ask = people.filter((person) => person.role === 'owner' && !person.disabled).map(({ name }) => name);
  return (
    <main className="sheet">
      <div className="paper">
        <h1 className="title">{title}</h1>
        <p>
          This sheet is for the {least}. Your role is {you?.role ?? 'not known'}.
          {ask.length > 0 && ` Ask ${ask.join(' or ')}.`}
        </p>
      </div>
    </main>
  );
}
