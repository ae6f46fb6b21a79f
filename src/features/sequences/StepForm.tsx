import { useState } from 'react';
import type { Pose } from '../../../shared/api/resources';
import type { ArmModel } from '../../../shared/arm/model';
import { MAX_BLEND_M, type Step, type StepSpeed } from '../../../shared/sequence/steps';
import { Field, SelectField } from '../../components/Field';
import { parseNumber } from '../../components/quantity';

/** A number that is written back only while it is one and inside its range. */
function NumberField({
  label,
  unit,
  value,
  min,
  max,
  onChange,
}: {
  label: string;
  unit: string;
  value: number;
  min: number;
  max: number;
  onChange: (value: number) => void;
}) {
  const [typed, setTyped] = useState(String(value));
  const parsed = parseNumber(typed);
  const good = parsed !== null && parsed >= min && parsed <= max;
  return (
    <Field
      label={label}
      unit={unit}
      text={false}
      inputMode="decimal"
      value={good && parsed !== value ? String(value) : typed}
      error={good ? null : `from ${min} to ${max}`}
      onChange={(event) => {
        setTyped(event.target.value);
        const next = parseNumber(event.target.value);
        if (next !== null && next >= min && next <= max) onChange(next);
      }}
    />
  );
}

/** The fields of one step. Letters typed into one field (`field`) are undone together. */
export function StepForm({
  step,
  poses,
  model,
  onChange,
}: {
  step: Step;
  poses: readonly Pose[];
  model: ArmModel;
  onChange: (step: Step, field?: string) => void;
}) {
  switch (step.kind) {
    case 'goTo':
    case 'straightTo':
      return (
        <div className="stepform">
          <SelectField label="Pose" value={step.poseId} onChange={(poseId) => onChange({ ...step, poseId })}>
            {!poses.some((pose) => pose.id === step.poseId) && (
              <option value={step.poseId}>choose a pose</option>
            )}
            {poses.map((pose) => (
              <option key={pose.id} value={pose.id}>
                {pose.name}
              </option>
            ))}
          </SelectField>
          <SelectField
            label="Way"
            value={step.kind}
            onChange={(kind) => onChange({ ...step, kind: kind as 'goTo' | 'straightTo' })}
          >
            <option value="goTo">joints together</option>
            <option value="straightTo">tool straight</option>
          </SelectField>
          <SelectField
            label="Speed"
            value={typeof step.speed === 'number' ? 'exact' : step.speed}
            onChange={(speed) => onChange({ ...step, speed: speed === 'exact' ? 0.5 : (speed as StepSpeed) })}
          >
            <option>creep</option>
            <option>easy</option>
            <option>full</option>
            <option value="exact">an exact %</option>
          </SelectField>
          {typeof step.speed === 'number' && (
            <NumberField
              label="Share of each joint’s limit"
              unit="%"
              min={1}
              max={100}
              value={Math.round(step.speed * 100)}
              onChange={(percent) => onChange({ ...step, speed: percent / 100 }, 'speed')}
            />
          )}
          <NumberField
            label="Settle"
            unit="s"
            min={0}
            max={60}
            value={step.settle}
            onChange={(settle) => onChange({ ...step, settle }, 'settle')}
          />
          <NumberField
            label="Go on within"
            unit="mm"
            min={0}
            max={MAX_BLEND_M * 1000}
            value={Math.round((step.blend ?? 0) * 1e4) / 10}
            onChange={(mm) => onChange({ ...step, blend: mm > 0 ? mm / 1000 : undefined }, 'blend')}
          />
        </div>
      );
    case 'grip': {
      const widest = (model.gripper?.opening ?? 0.001) * 1000;
      return (
        <div className="stepform">
          <NumberField
            label="Opening"
            unit="mm"
            min={0}
            max={Math.round(widest * 10) / 10}
            value={Math.round(step.opening * widest * 10) / 10}
            onChange={(mm) => onChange({ ...step, opening: Math.min(1, mm / widest) }, 'opening')}
          />
        </div>
      );
    }
    case 'wait':
      return (
        <div className="stepform">
          <NumberField
            label="Wait"
            unit="s"
            min={0}
            max={3600}
            value={step.seconds}
            onChange={(seconds) => onChange({ ...step, seconds }, 'seconds')}
          />
        </div>
      );
    case 'again':
      return (
        <div className="stepform">
          <NumberField
            label="Times"
            unit="×"
            min={1}
            max={1000}
            value={step.times}
            onChange={(times) => onChange({ ...step, times: Math.round(times) }, 'times')}
          />
        </div>
      );
    case 'remark':
      return (
        <div className="stepform">
          <Field
            label="Remark"
            value={step.text}
            maxLength={500}
            onChange={(event) => onChange({ ...step, text: event.target.value }, 'text')}
          />
        </div>
      );
  }
}
