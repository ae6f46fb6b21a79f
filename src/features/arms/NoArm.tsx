import './arms.css';
import type { Person } from '../../../shared/api/resources';
import { type Role, roleIncludes } from '../../../shared/team/roles';
import { usePeople } from '../../api/team';
import { BLANK_ARM } from '../../components/drawings/blank-arm';
import { BLANK_BENCH } from '../../components/drawings/blank-bench';
import { Strokes } from '../../components/drawings/Drawing';

const STEPS: { name: string; does: string; role: Role }[] = [
  {
    name: 'Build',
    does: 'Joints, links, drives and ratios, with a live drawing. Start from one of ours.',
    role: 'builder',
  },
  {
    name: 'Try it on the drawing',
    does: 'Until a board is connected the arm is simulated. Everything works except the metal.',
    role: 'operator',
  },
  { name: 'Teach and run', does: 'Capture poses, record a sequence, rehearse it, run it.', role: 'teacher' },
];

/** Who does a step: the first people whose role includes it, by name. */
function whoDoes(people: readonly Person[], role: Role): string {
  const able = people.filter((person) => !person.disabled && roleIncludes(person.role, role));
  const exactly = able.find((person) => person.role === role) ?? able[0];
  return exactly ? `${exactly.name}, ${exactly.role}` : `needs a ${role}`;
}

/** The sheet that waits for its first arm. */
export function NoArm({ mayBuild, onBuild }: { mayBuild: boolean; onBuild: () => void }) {
  const people = usePeople().data ?? [];
  return (
    <main className="sheet na">
      <section className="pane l" aria-hidden="true">
        <svg className="dwg" viewBox="0 0 846 744" preserveAspectRatio="xMidYMid slice">
          <g transform="translate(60 60)">
            <Strokes of={BLANK_BENCH} />
            <g className="blank">
              <Strokes of={BLANK_ARM} />
            </g>
            <text className="n" x="184.9" y="177.4" textAnchor="middle">
              ?
            </text>
            <text className="n" x="468.8" y="116.7" textAnchor="middle">
              ?
            </text>
          </g>
        </svg>
      </section>
      <section className="pane r">
        <h1>No arm yet</h1>
        <p>
          This sheet is waiting for one. Draw it up from its parts, and Elbowroom works out how far it reaches
          before anything moves.
        </p>
        <ol>
          {STEPS.map(({ name, does, role }, i) => (
            <li key={name}>
              <i aria-hidden="true">{i + 1}</i>
              <div>
                <b>{name}</b>
                <span>{does}</span>
              </div>
              <span className="note">{whoDoes(people, role)}</span>
            </li>
          ))}
        </ol>
        <div className="go2">
          {mayBuild ? (
            <button type="button" className="btn ink" onClick={onBuild}>
              Build an arm…
            </button>
          ) : (
            <p className="quiet">A builder describes arms. The owner gives that role.</p>
          )}
        </div>
      </section>
    </main>
  );
}
