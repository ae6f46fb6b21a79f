import { useState } from 'react';
import { Outlet } from 'react-router-dom';
import { may } from '../../shared/team/roles';
import { api } from '../api/client';
import { useSession } from '../api/session';
import { StopRegion } from '../components/StopRegion';
import { Header } from '../features/shell/Header';
import { useEscapeStops } from '../live/use-live';

type StopState = 'ready' | 'sent' | 'acknowledged' | 'noAnswer';

/** Around the workshop's sheets. Stop here stops every arm. */
export function Component() {
  const role = useSession().data?.you?.role ?? 'observer';
  const [stop, setStop] = useState<StopState>('ready');
  const stopAll = () => {
    setStop('sent');
    void api.post('/stop', {}, null).then(
      () => setStop('acknowledged'),
      () => setStop('noAnswer'),
    );
  };
  useEscapeStops(stopAll);
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
        <StopRegion state={stop} onStop={stopAll} label="Stop every arm" />
      </footer>
    </div>
  );
}
