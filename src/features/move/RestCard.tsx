import { useState } from 'react';
import type { ArmModel } from '../../../shared/arm/model';
import { may } from '../../../shared/team/roles';
import { namesOf } from '../../components/joint-names';
import { toast } from '../../components/toast';
import { sendCommand } from '../../live/connection';
import { useArmState, useHello, useInControl } from '../../live/use-live';
import { EnergiseDialog } from './EnergiseDialog';

/** At rest: what Energise will do, said before it does it. */
export function RestCard({ model }: { model: ArmModel }) {
  const [open, setOpen] = useState(false);
  const role = useHello()?.you.role ?? 'observer';
  const control = useArmState((state) => state?.control ?? null);
  const energising = useArmState((state) => state?.motors === 'energising');
  const linkSteady = useArmState((state) => state?.link.state === 'steady');
  const yours = useInControl();
  const steppers = model.joints.flatMap((joint, i) => (joint.drive.kind === 'stepper' ? [i] : []));
  const servos = model.joints.flatMap((joint, i) => (joint.drive.kind === 'servo' ? [i] : []));
  const blocked = !may(role, 'arm.control')
    ? 'An observer watches and can stop. Ask the owner for the operator role.'
    : control && !yours
      ? `${control.name} has control.`
      : !linkSteady
        ? 'Waiting for the link.'
        : null;
  return (
    <div className="wake">
      <div className="w1">
        <h2 className="h2">
          {energising
            ? `${model.name} is being energised.`
            : `${model.name} is resting. Its position is unknown.`}
        </h2>
        <p className="small quiet">
          Energise puts current on the motors. It moves no joint on purpose, and this is what it will do:
        </p>
        <ol>
          <li>
            <i>1</i>
            <span>Asks whether hands and bench are clear, and where each servo stands now.</span>
          </li>
          <li>
            <i>2</i>
            <span>
              Energises one joint after another: {namesOf(model, steppers).toLowerCase()} stand where they
              are.
            </span>
          </li>
          {servos.length > 0 && (
            <li>
              <i>3</i>
              <span>
                <b>
                  {namesOf(model, servos)} {servos.length > 1 ? 'are servos' : 'is a servo'} and may jump
                </b>{' '}
                to the angle you gave.
              </span>
            </li>
          )}
          <li>
            <i>{servos.length > 0 ? 4 : 3}</i>
            <span>
              Leaves the position unknown: creep, holds and nudges only, until it is declared or referenced.
            </span>
          </li>
        </ol>
      </div>
      <div className="w2">
        <div>
          <div className="lab">
            In control: <b>{control ? (yours ? 'you' : control.name) : 'nobody'}</b>
          </div>
          {!control && may(role, 'arm.control') && (
            <button
              type="button"
              className="btn"
              onClick={() =>
                void sendCommand({ type: 'control.take' }).then(
                  (outcome) => !outcome.ok && toast(outcome.message),
                )
              }
            >
              Take control
            </button>
          )}
        </div>
        <div>
          <button
            type="button"
            className="btn ink big"
            disabled={blocked !== null || energising}
            onClick={() => setOpen(true)}
          >
            Energise…
          </button>
          <p className="note">
            {blocked ?? (yours ? 'Asks first.' : 'Takes control for you first, so everyone sees your name.')}
          </p>
        </div>
      </div>
      <EnergiseDialog open={open} onClose={() => setOpen(false)} model={model} />
    </div>
  );
}
