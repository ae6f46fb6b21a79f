import { availableTorque, unpoweredHold } from '../../../shared/arm/drives';
import {
  type ArmModel,
  type Joint,
  type LinkShape,
  MATERIAL_NAMES,
  type Vec3,
} from '../../../shared/arm/model';
import {
  degToRad,
  figure,
  fromShown,
  kgfCmToNm,
  mmToM,
  mToMm,
  nmToKgfCm,
  radPerSToSecondsPer60Deg,
  radToDeg,
  secondsPer60DegToRadPerS,
  shownUnit,
  toShown,
} from '../../../shared/arm/units';
import { Field, SelectField } from '../../components/Field';
import { withMassFromShape } from './model-edit';
import { QuantityField } from './QuantityField';

interface Props {
  joint: Joint;
  index: number;
  errors: Map<string, string>;
  disabled: boolean;
  onChange: (joint: Joint) => void;
}

/** Everything about one joint: where it is, how far and how fast it goes, its link, its drive. */
export function JointForm(props: Props) {
  return (
    <div className="stack">
      <Motion {...props} />
      <Place {...props} />
      <LinkFields {...props} />
      <DriveFields {...props} />
      <WordFields {...props} />
    </div>
  );
}

function Motion({ joint, index, errors, disabled, onChange }: Props) {
  const { type, limits, hardRange } = joint;
  const unit = shownUnit(type);
  const error = (path: string) => errors.get(`joints.${index}.${path}`) ?? null;
  const setLimits = (change: Partial<Joint['limits']>) =>
    onChange({ ...joint, limits: { ...limits, ...change } });
  return (
    <fieldset disabled={disabled}>
      <legend className="h3">Motion</legend>
      <div className="grid3">
        <Field
          label="Name"
          value={joint.name}
          error={error('name')}
          maxLength={40}
          onChange={(event) => onChange({ ...joint, name: event.target.value })}
        />
        <QuantityField
          label="Soft limit, low"
          unit={unit}
          value={toShown(type, limits.lower)}
          error={error('limits') ?? error('limits.lower')}
          onChange={(v) => setLimits({ lower: fromShown(type, v) })}
        />
        <QuantityField
          label="Soft limit, high"
          unit={unit}
          value={toShown(type, limits.upper)}
          error={error('limits')}
          onChange={(v) => setLimits({ upper: fromShown(type, v) })}
        />
        <QuantityField
          label="Mechanics end, low"
          unit={unit}
          value={toShown(type, hardRange.lower)}
          onChange={(v) => onChange({ ...joint, hardRange: { ...hardRange, lower: fromShown(type, v) } })}
        />
        <QuantityField
          label="Mechanics end, high"
          unit={unit}
          value={toShown(type, hardRange.upper)}
          onChange={(v) => onChange({ ...joint, hardRange: { ...hardRange, upper: fromShown(type, v) } })}
        />
        <QuantityField
          label="Top speed"
          unit={`${unit}/s`}
          value={toShown(type, limits.velocity)}
          error={error('limits.velocity')}
          onChange={(v) => setLimits({ velocity: fromShown(type, v) })}
        />
        <QuantityField
          label="Acceleration"
          unit={`${unit}/s²`}
          value={toShown(type, limits.acceleration)}
          error={error('limits.acceleration')}
          onChange={(v) => setLimits({ acceleration: fromShown(type, v) })}
        />
        <QuantityField
          label="Jerk"
          unit={`${unit}/s³`}
          value={toShown(type, limits.jerk)}
          error={error('limits.jerk')}
          onChange={(v) => setLimits({ jerk: fromShown(type, v) })}
        />
      </div>
    </fieldset>
  );
}

const AXES: [string, Vec3][] = [
  ['x', [1, 0, 0]],
  ['−x', [-1, 0, 0]],
  ['y', [0, 1, 0]],
  ['−y', [0, -1, 0]],
  ['z', [0, 0, 1]],
  ['−z', [0, 0, -1]],
];

function Place({ joint, index, errors, disabled, onChange }: Props) {
  const { xyz, rpy } = joint.origin;
  const known = AXES.find(([, axis]) => axis.every((v, k) => v === joint.axis[k]))?.[0] ?? 'other';
  const set = (kind: 'xyz' | 'rpy', k: number, value: number) =>
    onChange({
      ...joint,
      origin: { ...joint.origin, [kind]: joint.origin[kind].map((v, i) => (i === k ? value : v)) as Vec3 },
    });
  return (
    <fieldset disabled={disabled}>
      <legend className="h3">Place, in the frame of the link before it</legend>
      <div className="grid3">
        {(['x', 'y', 'z'] as const).map((name, k) => (
          <QuantityField
            key={name}
            label={name}
            unit="mm"
            value={mToMm(xyz[k] ?? 0)}
            onChange={(v) => set('xyz', k, mmToM(v))}
          />
        ))}
        {(['roll', 'pitch', 'yaw'] as const).map((name, k) => (
          <QuantityField
            key={name}
            label={name}
            unit="°"
            value={radToDeg(rpy[k] ?? 0)}
            onChange={(v) => set('rpy', k, degToRad(v))}
          />
        ))}
        <SelectField
          label={joint.type === 'revolute' ? 'Turns about' : 'Slides along'}
          value={known}
          disabled={disabled}
          help={errors.get(`joints.${index}.axis`) ?? 'positive by the right-hand rule'}
          onChange={(name) => onChange({ ...joint, axis: AXES.find(([n]) => n === name)?.[1] ?? joint.axis })}
        >
          {AXES.map(([name]) => (
            <option key={name}>{name}</option>
          ))}
          {known === 'other' && <option>other</option>}
        </SelectField>
      </div>
    </fieldset>
  );
}

function LinkFields({ joint, disabled, onChange }: Props) {
  const { link } = joint;
  const { shape } = link;
  const setShape = (next: LinkShape) =>
    onChange(withMassFromShape({ ...joint, link: { ...link, shape: next } }));
  const setEnd = (k: number, value: number) => {
    const end = link.end.map((v, i) => (i === k ? value : v)) as Vec3;
    if (Math.hypot(...end) < 1e-4) return;
    onChange({ ...joint, link: { ...link, end } });
  };
  const kinds: Record<LinkShape['kind'], () => LinkShape> = {
    tube: () => ({ kind: 'tube', outer: 0.025, inner: 0.022, material: shape.material }),
    bar: () => ({ kind: 'bar', diameter: 0.016, material: shape.material }),
    box: () => ({ kind: 'box', width: 0.04, height: 0.03, material: shape.material }),
  };
  return (
    <fieldset disabled={disabled}>
      <legend className="h3">Link</legend>
      <div className="grid3">
        <SelectField
          label="Section"
          value={shape.kind}
          disabled={disabled}
          onChange={(kind) => setShape(kinds[kind as LinkShape['kind']]())}
        >
          <option value="tube">tube</option>
          <option value="bar">round bar</option>
          <option value="box">box</option>
        </SelectField>
        <SelectField
          label="Material"
          value={shape.material}
          disabled={disabled}
          onChange={(material) => setShape({ ...shape, material: material as LinkShape['material'] })}
        >
          {MATERIAL_NAMES.map((name) => (
            <option key={name}>{name}</option>
          ))}
        </SelectField>
        {shape.kind === 'tube' && (
          <>
            <QuantityField
              label="Outer diameter"
              unit="mm"
              value={mToMm(shape.outer)}
              onChange={(v) => v > mToMm(shape.inner) && setShape({ ...shape, outer: mmToM(v) })}
            />
            <QuantityField
              label="Inner diameter"
              unit="mm"
              value={mToMm(shape.inner)}
              onChange={(v) => v >= 0 && v < mToMm(shape.outer) && setShape({ ...shape, inner: mmToM(v) })}
            />
          </>
        )}
        {shape.kind === 'bar' && (
          <QuantityField
            label="Diameter"
            unit="mm"
            value={mToMm(shape.diameter)}
            onChange={(v) => v > 0 && setShape({ ...shape, diameter: mmToM(v) })}
          />
        )}
        {shape.kind === 'box' && (
          <>
            <QuantityField
              label="Width"
              unit="mm"
              value={mToMm(shape.width)}
              onChange={(v) => v > 0 && setShape({ ...shape, width: mmToM(v) })}
            />
            <QuantityField
              label="Height"
              unit="mm"
              value={mToMm(shape.height)}
              onChange={(v) => v > 0 && setShape({ ...shape, height: mmToM(v) })}
            />
          </>
        )}
        {(['x', 'y', 'z'] as const).map((name, k) => (
          <QuantityField
            key={name}
            label={`Far end, ${name}`}
            unit="mm"
            value={mToMm(link.end[k] ?? 0)}
            onChange={(v) => setEnd(k, mmToM(v))}
          />
        ))}
        <QuantityField
          label="Mass, with what sits on it"
          unit="g"
          value={link.mass * 1000}
          onChange={(v) => v >= 0 && onChange({ ...joint, link: { ...link, mass: v / 1000 } })}
        />
        <QuantityField
          label="Centre of mass, along x"
          unit="mm"
          value={mToMm(link.com[0])}
          onChange={(v) =>
            onChange({ ...joint, link: { ...link, com: [mmToM(v), link.com[1], link.com[2]] } })
          }
        />
      </div>
      <p className="line">
        <button
          type="button"
          className="btn sm"
          disabled={disabled}
          onClick={() => onChange(withMassFromShape(joint))}
        >
          Work mass and inertia out from the shape
        </button>
        <span className="note">
          Changing the section or material does so, and leaves out motors that sit on the link.
        </span>
      </p>
    </fieldset>
  );
}

function DriveFields({ joint, disabled, onChange }: Props) {
  const { drive, type } = joint;
  const torqueUnit = type === 'revolute' ? 'N·m' : 'N';
  const at = (speed: number) => figure(availableTorque(drive, speed), type === 'revolute' ? 2 : 0);
  return (
    <fieldset disabled={disabled}>
      <legend className="h3">Drive: {drive.kind === 'stepper' ? 'geared stepper' : 'hobby servo'}</legend>
      <div className="grid3">
        {drive.kind === 'stepper' ? (
          <>
            <QuantityField
              label="Holding torque, at the motor"
              unit="N·cm"
              value={drive.holdingTorque * 100}
              help={`${figure(nmToKgfCm(drive.holdingTorque), 2)} kg·cm; the speed curve scales with it`}
              onChange={(v) => {
                if (!(v > 0)) return;
                const holdingTorque = v / 100;
                const scale = holdingTorque / drive.holdingTorque;
                onChange({
                  ...joint,
                  drive: {
                    ...drive,
                    holdingTorque,
                    torqueCurve: drive.torqueCurve.map((p) => ({ ...p, torque: p.torque * scale })),
                  },
                });
              }}
            />
            <QuantityField
              label="Ratio"
              unit=":1"
              value={drive.ratio}
              decimals={2}
              onChange={(v) => v > 0 && onChange({ ...joint, drive: { ...drive, ratio: v } })}
            />
            <QuantityField
              label="Efficiency of the gearing"
              unit="%"
              value={drive.efficiency * 100}
              decimals={0}
              onChange={(v) =>
                v > 0 && v <= 100 && onChange({ ...joint, drive: { ...drive, efficiency: v / 100 } })
              }
            />
            <QuantityField
              label="Full steps per turn"
              unit="steps"
              value={drive.stepsPerRev}
              decimals={0}
              onChange={(v) =>
                v >= 4 && onChange({ ...joint, drive: { ...drive, stepsPerRev: Math.round(v) } })
              }
            />
            <QuantityField
              label="Microsteps"
              unit="×"
              value={drive.microsteps}
              decimals={0}
              onChange={(v) =>
                v >= 1 && onChange({ ...joint, drive: { ...drive, microsteps: Math.round(v) } })
              }
            />
            {drive.lead !== undefined && (
              <QuantityField
                label="Travel per turn"
                unit="mm"
                value={mToMm(drive.lead)}
                onChange={(v) => v > 0 && onChange({ ...joint, drive: { ...drive, lead: mmToM(v) } })}
              />
            )}
          </>
        ) : (
          <>
            <QuantityField
              label="Stall torque"
              unit="kg·cm"
              value={nmToKgfCm(drive.stallTorque)}
              help={`${figure(drive.stallTorque, 2)} N·m at the supply you use`}
              onChange={(v) =>
                v > 0 && onChange({ ...joint, drive: { ...drive, stallTorque: kgfCmToNm(v) } })
              }
            />
            <QuantityField
              label="Speed, no load"
              unit="s/60°"
              decimals={2}
              value={radPerSToSecondsPer60Deg(drive.noLoadSpeed)}
              onChange={(v) =>
                v > 0 && onChange({ ...joint, drive: { ...drive, noLoadSpeed: secondsPer60DegToRadPerS(v) } })
              }
            />
            <QuantityField
              label="Ratio"
              unit=":1"
              value={drive.ratio}
              decimals={2}
              onChange={(v) => v > 0 && onChange({ ...joint, drive: { ...drive, ratio: v } })}
            />
          </>
        )}
      </div>
      <p className="small worked">
        At the joint:{' '}
        <span className="n">
          {at(0)} {torqueUnit}
        </span>{' '}
        standing,{' '}
        <span className="n">
          {at(joint.limits.velocity)} {torqueUnit}
        </span>{' '}
        at top speed; with the motors off it holds{' '}
        <span className="n">
          {figure(unpoweredHold(drive), 2)} {torqueUnit}
        </span>
        .
      </p>
    </fieldset>
  );
}

function WordFields({ joint, disabled, onChange }: Props) {
  const { words } = joint;
  const set = (change: Partial<Joint['words']>) => onChange({ ...joint, words: { ...words, ...change } });
  return (
    <fieldset disabled={disabled}>
      <legend className="h3">Words on its buttons</legend>
      <div className="grid3">
        <Field
          label="Positive"
          value={words.positive}
          maxLength={20}
          onChange={(event) => set({ positive: event.target.value })}
        />
        <Field
          label="while held"
          value={words.positiveDoing}
          maxLength={24}
          onChange={(event) => set({ positiveDoing: event.target.value })}
        />
        <Field
          label="Negative"
          value={words.negative}
          maxLength={20}
          onChange={(event) => set({ negative: event.target.value })}
        />
        <Field
          label="while held"
          value={words.negativeDoing}
          maxLength={24}
          onChange={(event) => set({ negativeDoing: event.target.value })}
        />
      </div>
    </fieldset>
  );
}

/** The tool point, the gripper and what it carries. */
export function ToolForm({
  model,
  disabled,
  onChange,
}: {
  model: ArmModel;
  disabled: boolean;
  onChange: (model: ArmModel) => void;
}) {
  const { tool, gripper, payload } = model;
  return (
    <div className="stack">
      <fieldset disabled={disabled}>
        <legend className="h3">Arm</legend>
        <div className="grid3">
          <Field
            label="Name"
            value={model.name}
            maxLength={40}
            onChange={(event) => onChange({ ...model, name: event.target.value })}
          />
          <Field
            label="Note"
            value={model.note}
            maxLength={500}
            onChange={(event) => onChange({ ...model, note: event.target.value })}
          />
        </div>
      </fieldset>
      <fieldset disabled={disabled}>
        <legend className="h3">Tool point, in the last link’s frame</legend>
        <div className="grid3">
          {(['x', 'y', 'z'] as const).map((name, k) => (
            <QuantityField
              key={name}
              label={name}
              unit="mm"
              value={mToMm(tool.xyz[k] ?? 0)}
              onChange={(v) =>
                onChange({
                  ...model,
                  tool: { ...tool, xyz: tool.xyz.map((old, i) => (i === k ? mmToM(v) : old)) as Vec3 },
                })
              }
            />
          ))}
        </div>
      </fieldset>
      {gripper && (
        <fieldset disabled={disabled}>
          <legend className="h3">Gripper</legend>
          <div className="grid3">
            <QuantityField
              label="Widest opening"
              unit="mm"
              value={mToMm(gripper.opening)}
              onChange={(v) => v > 0 && onChange({ ...model, gripper: { ...gripper, opening: mmToM(v) } })}
            />
            <QuantityField
              label="Closed to open"
              unit="s"
              decimals={2}
              value={gripper.travelTime}
              onChange={(v) => v > 0 && onChange({ ...model, gripper: { ...gripper, travelTime: v } })}
            />
            <QuantityField
              label="Finger force"
              unit="N"
              value={gripper.force}
              onChange={(v) => v > 0 && onChange({ ...model, gripper: { ...gripper, force: v } })}
            />
          </div>
        </fieldset>
      )}
      {payload && (
        <fieldset disabled={disabled}>
          <legend className="h3">What it carries when closed</legend>
          <div className="grid3">
            <QuantityField
              label="Payload"
              unit="g"
              value={payload.mass * 1000}
              onChange={(v) => v >= 0 && onChange({ ...model, payload: { ...payload, mass: v / 1000 } })}
            />
          </div>
        </fieldset>
      )}
    </div>
  );
}
