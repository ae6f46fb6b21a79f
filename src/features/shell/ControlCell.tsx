import { DropdownMenu } from 'radix-ui';
import { useState } from 'react';
import { may } from '../../../shared/team/roles';
import { usePeople } from '../../api/team';
import { clock } from '../../components/when';
import { sendCommand } from '../../live/connection';
import { useArmState, useHello } from '../../live/use-live';
import { toast } from './toast';

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
      <DropdownMenu.Root modal={false} defaultOpen>
        <DropdownMenu.Trigger className="btn sm ink">Answer</DropdownMenu.Trigger>
        <DropdownMenu.Portal>
          <DropdownMenu.Content className="menu-list" side="top" align="end" sideOffset={6}>
            <DropdownMenu.Item onSelect={() => send({ type: 'control.answer', accept: true })}>
              Give control to {control.request.name}
            </DropdownMenu.Item>
            <DropdownMenu.Item onSelect={() => send({ type: 'control.answer', accept: false })}>
              Keep control
            </DropdownMenu.Item>
          </DropdownMenu.Content>
        </DropdownMenu.Portal>
      </DropdownMenu.Root>
    );
  if (yours) return <HandOver onSend={send} />;
  if (hello && may(hello.you.role, 'control.force'))
    return (
      <DropdownMenu.Root modal={false}>
        <DropdownMenu.Trigger className="btn sm">Ask</DropdownMenu.Trigger>
        <DropdownMenu.Portal>
          <DropdownMenu.Content className="menu-list" side="top" align="end" sideOffset={6}>
            <DropdownMenu.Item onSelect={() => send({ type: 'control.take' })}>
              Ask {control.name}
            </DropdownMenu.Item>
            <DropdownMenu.Item onSelect={() => send({ type: 'control.take', force: true })}>
              Stop the arm and take control
            </DropdownMenu.Item>
          </DropdownMenu.Content>
        </DropdownMenu.Portal>
      </DropdownMenu.Root>
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
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger className="btn sm">Hand over</DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content className="menu-list" side="top" align="end" sideOffset={6}>
          <DropdownMenu.Item onSelect={() => onSend({ type: 'control.handBack' })}>
            Hand back, to nobody
          </DropdownMenu.Item>
          {others.map((person) => (
            <DropdownMenu.Item
              key={person.id}
              onSelect={() => onSend({ type: 'control.handOver', toUserId: person.id })}
            >
              Hand over to {person.name}
            </DropdownMenu.Item>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
