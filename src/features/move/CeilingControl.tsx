import { useEffect, useState } from 'react';
import { CEILINGS } from '../../../shared/arm/trust';
import { CeilingIcon, LockIcon } from '../../components/icons';
import { Segmented } from '../../components/Segmented';
import { toast } from '../../components/toast';
import { sendCommand } from '../../live/connection';
import { useArmState } from '../../live/use-live';

/** The person's ceiling. While the arm moves it can only be lowered; above what trust allows it has no effect yet. */
export function CeilingControl({ reason, moving }: { reason: string | null; moving: boolean }) {
  const ceiling = useArmState((state) => state?.ceiling ?? null);
  const person = ceiling?.person ?? CEILINGS.creep;
  const [typed, setTyped] = useState(String(Math.round(person * 100)));
  useEffect(() => setTyped(String(Math.round(person * 100))), [person]);
  const locked = reason !== null;
  const set = (fraction: number, peopleClear = false) =>
    void sendCommand({ type: 'ceiling.set', fraction, peopleClear }).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  const option = (name: keyof typeof CEILINGS) => ({
    value: CEILINGS[name] as number,
    locked: moving && CEILINGS[name] > person,
    label: (
      <>
        <span className="stp">
          <CeilingIcon fraction={CEILINGS[name]} />
        </span>
        {name}
      </>
    ),
  });
  return (
    <div className="c3">
      <div className="lab">
        <span>Speed ceiling</span>
        {(locked || moving) && (
          <span className="lk ex2">
            <LockIcon />
            {reason ?? 'only lower while moving'}
          </span>
        )}
      </div>
      <div className="ceil">
        <Segmented
          label="Speed ceiling"
          locked={locked}
          value={person}
          options={[option('creep'), option('easy'), option('full')]}
          onChange={(fraction) => set(fraction)}
        />
        <form
          className={`entry ${locked ? 'locked' : ''}`}
          onSubmit={(event) => {
            event.preventDefault();
            const percent = Number(typed);
            if (percent >= 1 && percent <= 100) set(percent / 100);
            else toast('Type a ceiling from 1 to 100 %.');
          }}
        >
          <input
            value={typed}
            disabled={locked}
            aria-label="Speed ceiling in percent"
            inputMode="numeric"
            onChange={(event) => setTyped(event.target.value)}
          />
          <span className="unit">%</span>
        </form>
        {person === 1 && !locked && (
          <label className="lk">
            <input
              type="checkbox"
              checked={ceiling?.peopleClear ?? false}
              disabled={moving}
              onChange={(event) => set(1, event.target.checked)}
            />
            people are clear
          </label>
        )}
      </div>
    </div>
  );
}
