import { useState } from 'react';
import { may } from '../../../shared/team/roles';
import { usePeople } from '../../api/team';
import { Menu, MenuButton, MenuItem, MenuList } from '../../components/Menu';
import { toast } from '../../components/toast';
import { clock } from '../../components/when';
import { sendCommand } from '../../live/connection';
import { useArmState, useHello } from '../../live/use-live';

/** Who has control, and the ways it changes hands. */
export function ControlCell() {
  const hello = useHello();
  const control = useArmState((state) => state?.control ?? null);
  const you = hello?.you;
  const yours = control !== null && control.userId === you?.userId;
  const request = control?.request ?? null;
  return (
    <div className="cell c-ctl">
      <span className="k">In control</span>
      <span className="v">{control ? (yours ? `You, ${control.name}` : control.name) : 'Nobody'}</span>
      <span className="s">
        {request
          ? request.userId === you?.userId
            ? 'asked, waiting 10 s'
            : `${request.name} asks for it`
          : control
            ? control.away
              ? 'away; lapses in 10 s'
              : `since ${clock(control.sinceMs)}`
            : 'free to take'}
      </span>
      {you && may(you.role, 'arm.control') && <ControlButton yours={yours} />}
    </div>
  );
}

function ControlButton({ yours }: { yours: boolean }) {
  const hello = useHello();
  const control = useArmState((state) => state?.control ?? null);
  const [asked, setAsked] = useState(false);
  const send = (command: Parameters<typeof sendCommand>[0]) =>
    void sendCommand(command).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  if (!control)
    return (
      <button type="button" className="btn sm" onClick={() => send({ type: 'control.take' })}>
        Take
      </button>
    );
  if (yours && control.request)
    return (
      <Menu defaultOpen>
        <MenuButton className="btn sm ink">Answer</MenuButton>
        <MenuList side="top" align="end" sideOffset={6}>
          <MenuItem onSelect={() => send({ type: 'control.answer', accept: true })}>
            Give control to {control.request.name}
          </MenuItem>
          <MenuItem onSelect={() => send({ type: 'control.answer', accept: false })}>Keep control</MenuItem>
        </MenuList>
      </Menu>
    );
  if (yours) return <HandOver onSend={send} />;
  if (hello && may(hello.you.role, 'control.force'))
    return (
      <Menu>
        <MenuButton className="btn sm">Ask</MenuButton>
        <MenuList side="top" align="end" sideOffset={6}>
          <MenuItem onSelect={() => send({ type: 'control.take' })}>Ask {control.name}</MenuItem>
          <MenuItem onSelect={() => send({ type: 'control.take', force: true })}>
            Stop the arm and take control
          </MenuItem>
        </MenuList>
      </Menu>
    );
  return (
    <button
      type="button"
      className="btn sm"
      disabled={asked && control.request !== null}
      onClick={() => {
        setAsked(true);
        send({ type: 'control.take' });
      }}
    >
      Ask
    </button>
  );
}

function HandOver({ onSend }: { onSend: (command: Parameters<typeof sendCommand>[0]) => void }) {
  const hello = useHello();
  const people = usePeople().data ?? [];
  const others = people.filter(
    (p) => p.id !== hello?.you.userId && !p.disabled && may(p.role, 'arm.control'),
  );
  return (
    <Menu>
      <MenuButton className="btn sm">Hand over</MenuButton>
      <MenuList side="top" align="end" sideOffset={6}>
        <MenuItem onSelect={() => onSend({ type: 'control.handBack' })}>Hand back, to nobody</MenuItem>
        {others.map((person) => (
          <MenuItem
            key={person.id}
            onSelect={() => onSend({ type: 'control.handOver', toUserId: person.id })}
          >
            Hand over to {person.name}
          </MenuItem>
        ))}
      </MenuList>
    </Menu>
  );
}
