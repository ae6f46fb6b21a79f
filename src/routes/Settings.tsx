import { may } from '../../shared/team/roles';
import { useSession } from '../api/session';
import { useTitle } from '../components/use-title';
import { ArmSettings } from '../features/arms/ArmSettings';
import { LetterKeys } from '../features/team/LetterKeys';
import { WorkshopName } from '../features/team/WorkshopName';
import { YouSection } from '../features/team/YouSection';

export function Component() {
  const session = useSession().data;
  useTitle('Settings', session?.workshop);
  if (!session?.you) return null;
  const { you, workshop } = session;
  return (
    <main className="sheet">
      <div className="paper settings">
        <h1 className="title">Settings</h1>
        <YouSection you={you} />
        <LetterKeys />
        {may(you.role, 'workshop.settings') && <WorkshopName name={workshop} />}
        {may(you.role, 'arm.unattended') ? (
          <ArmSettings />
        ) : (
          <p className="small quiet">
            The owner changes the workshop’s name and what its arms may do unattended.
          </p>
        )}
      </div>
    </main>
  );
}
