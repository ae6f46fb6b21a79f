import '../features/arms/workshop-arms.css';
import { Outlet } from 'react-router-dom';
import { may } from '../../shared/team/roles';
import { useArms } from '../api/arms';
import { useSession } from '../api/session';
import { StopRegion } from '../components/StopRegion';
import { useStopEveryArm } from '../features/arms/use-stop-every-arm';
import { Header } from '../features/shell/Header';
import { useEscapeStops } from '../live/use-live';

/** Around the workshop's sheets. Stop here stops every arm. */
export function Component() {
  const role = useSession().data?.you?.role ?? 'observer';
  const arms = useArms().data;
  const { word, stop } = useStopEveryArm();
  useEscapeStops(stop);
  return (
    <div className="page">
      <Header
        tabs={[
          { to: '/', label: 'Arms' },
          { to: '/team', label: 'Team' },
          ...(may(role, 'outbox.see') ? [{ to: '/outbox', label: 'Outbox' }] : []),
          ...(may(role, 'audit.see') ? [{ to: '/audit', label: 'Audit' }] : []),
          { to: '/settings', label: 'Settings' },
        ]}
      />
      <Outlet />
      <footer className="strip only-stop" role="contentinfo" aria-label="Stop every arm">
        <StopRegion state={word} onStop={stop} label="Stop every arm" nothing={arms?.length === 0} />
      </footer>
    </div>
  );
}
