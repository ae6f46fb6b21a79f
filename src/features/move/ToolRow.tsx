import { memo } from 'react';
import { figure, shownValue } from '../../../shared/arm/units';
import type { ToolAxis, ToolFrame, ToolKeeps } from '../../../shared/kinematics';
import { HoldButton } from '../../components/HoldButton';
import { ToolPictogram } from '../../components/pictograms';
import { toast } from '../../components/toast';
import { sendNudge } from '../../live/nudge';
import { useTelemetry } from '../../live/use-live';
import { KEEPS_WORDS, toolAxisWords } from './tool-words';

/** One axis of the tool: two hold buttons, where the tool point is along it, and what stays as it is meanwhile. */
export const ToolRow = memo(function ToolRow({
  frame,
  axis,
  keeps,
  reason,
  nudge,
  reach,
}: {
  frame: ToolFrame;
  axis: ToolAxis;
  keeps: ToolKeeps;
  /** Why nothing may move now, in a word or two, or null. */
  reason: string | null;
  /** Nudge size chosen (rad or m), or null to move while held. */
  nudge: number | null;
  /** How far from the base the tool point can be, m: the length of the bar. */
  reach: number;
}) {
  const turns = axis.length === 2;
  const letter = 'xyz'.indexOf(axis.at(-1)!);
  const words = toolAxisWords(frame, axis);
  const placed = frame === 'base' && !turns;
  const at = useTelemetry((t) => (placed && t ? Math.round(t.tool.position[letter]! * 1e4) / 1e4 : null));
  const press = (direction: 1 | -1) => () => {
    const amount = (nudge ?? (turns ? Math.PI / 360 : 0.001)) * direction;
    void sendNudge(frame, axis, amount).then((outcome) => {
      if (!outcome.ok) toast(outcome.message);
    });
  };
  const button = (direction: 1 | -1) => {
    const word = direction > 0 ? words.positive : words.negative;
    return (
      <HoldButton
        id={`tool-${frame}-${axis}-${direction}`}
        side={direction > 0 ? 'pos' : 'neg'}
        motion={{ kind: 'jog', frame, axis, direction }}
        picture={<ToolPictogram axis={axis} direction={direction} />}
        word={word}
        doing={direction > 0 ? words.positiveDoing : words.negativeDoing}
        label={`${words.name}, ${word}: hold to move`}
        reason={reason}
        nudge={press(direction)}
        nudging={nudge !== null}
        nudgeText={
          nudge === null
            ? undefined
            : `${direction > 0 ? '+' : '−'}${shownValue(turns ? 'revolute' : 'prismatic', nudge, turns && nudge < 0.01 ? 1 : 0)}`
        }
      />
    );
  };
  const share = at === null ? null : Math.min(1, Math.max(0, (at / reach + 1) / 2));
  return (
    <div className="joint toolrow" data-axis={`${frame} ${axis}`}>
      {button(-1)}
      <div className="travel">
        <div className="th">
          <h3>{words.name}</h3>
          {at !== null && (
            <span className="val">
              {figure(at * 1000, 1)}
              <span className="u">mm</span>
            </span>
          )}
        </div>
        {share !== null && (
          <div className="track" aria-hidden="true">
            <i className="zero" style={{ left: '50%' }} />
            <i className="nd" style={{ left: `${share * 100}%` }}>
              <svg viewBox="0 0 15 15" preserveAspectRatio="xMidYMin">
                <path
                  d="M1.2 1h12.6v6.5L7.5 14 1.2 7.5Z"
                  fill="currentColor"
                  stroke="currentColor"
                  strokeWidth="1.8"
                />
              </svg>
            </i>
          </div>
        )}
        <div className="hr">
          <span className="ht">{KEEPS_WORDS[keeps]}</span>
        </div>
      </div>
      {button(1)}
    </div>
  );
});
