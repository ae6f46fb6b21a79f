import { Link, Outlet, useLocation, useParams } from 'react-router-dom';
import type { Arm } from '../../shared/api/resources';
import { useArm } from '../api/arms';
import { errorText } from '../api/client';
import { CaptureButton } from '../components/CaptureButton';
import { Message } from '../components/Message';
import { Header } from '../features/shell/Header';
import { LiveRegion } from '../features/shell/LiveRegion';
import { StatusStrip } from '../features/shell/StatusStrip';
import { useArmLive, useConnection, useEscapeStops } from '../live/use-live';

/** Around every sheet of an arm: header, status strip, Stop. The socket is open as long as this is mounted. */
export function Component() {
  const { armId = '' } = useParams();
  const arm = useArm(armId);
  if (arm.isPending) return <p className="paper">Opening the arm…</p>;
  if (!arm.data)
    return (
      <main className="paper">
        <Message kind="fault">{errorText(arm.error)}</Message>
        <Link to="/">All arms</Link>
      </main>
    );
  return <ArmPages key={armId} arm={arm.data} />;
}

function ArmPages({ arm }: { arm: Arm }) {
  useArmLive(arm.id);
  useEscapeStops();
  const glance = useLocation().pathname.endsWith('/glance');
  const lost = useConnection() === 'lost';
  if (glance)
    return (
      <>
        <LiveRegion />
        <Outlet context={arm} />
      </>
    );
  const at = `/arms/${arm.id}`;
  return (
    <div className="page">
      <Header
        arm={arm}
        tabs={[
          { to: `${at}/move`, label: 'Move' },
          { to: `${at}/poses`, label: 'Poses' },
          { to: `${at}/sequences`, label: 'Sequences' },
          { to: `${at}/runs`, label: 'Runs' },
          { to: `${at}/build`, label: 'Build' },
        ]}
        phoneAction={<CaptureButton arm={arm} className="ph" />}
        tools={
          <Link className="tool" style={{ textDecoration: 'none' }} to={`${at}/glance`}>
            Glance
          </Link>
        }
      />
      <LiveRegion />
      <div className={`contents ${lost ? 'is-lost' : ''}`} style={{ display: 'contents' }}>
        <Outlet context={arm} />
      </div>
      <StatusStrip model={arm.model} />
    </div>
  );
}
