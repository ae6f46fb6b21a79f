import { useState } from 'react';
import { may } from '../../shared/team/roles';
import { useArms } from '../api/arms';
import { useSession } from '../api/session';
import { QueryState } from '../components/QueryState';
import { useTitle } from '../components/use-title';
import { ArmCard } from '../features/arms/ArmCard';
import { NewArmDialog } from '../features/arms/NewArmDialog';
import { NoArm } from '../features/arms/NoArm';

/** Every arm of the workshop on its card. */
export function Component() {
  const session = useSession().data;
  useTitle('Arms', session?.workshop);
  const arms = useArms();
  const [making, setMaking] = useState(false);
  const mayBuild = may(session?.you?.role ?? 'observer', 'arm.build');
  return (
    <>
      {arms.data?.length === 0 ? (
        <NoArm mayBuild={mayBuild} onBuild={() => setMaking(true)} />
      ) : (
        <main className="sheet">
          <div className="paper">
            <div className="line">
              <h1 className="title">Arms</h1>
              {mayBuild && (
                <button type="button" className="btn end" onClick={() => setMaking(true)}>
                  Build an arm…
                </button>
              )}
            </div>
            <QueryState query={arms} waiting="Looking for arms…" empty={null} />
            <div className="cardgrid">
              {arms.data?.map((arm) => (
                <ArmCard key={arm.id} arm={arm} old={arms.isError} />
              ))}
            </div>
          </div>
        </main>
      )}
      {making && <NewArmDialog onClose={() => setMaking(false)} />}
    </>
  );
}
