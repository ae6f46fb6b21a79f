import { chmodSync, existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { DEMO_ARMS } from '../shared/arm/demo-arms';
import { degToRad } from '../shared/arm/units';
import type { Step } from '../shared/sequence/steps';
import type { Role } from '../shared/team/roles';
import { hashNewPassword } from './auth/people-store';
import type { Context } from './context';
import { prepare } from './sequences/programs';
import { readablePassword } from './settings';

/** The invented workshop of the demo. */
const WORKSHOP = 'Tidemill Seed Library';
const TEAM: { name: string; role: Role }[] = [
  { name: 'Ada', role: 'owner' },
  { name: 'Moss', role: 'builder' },
  { name: 'Ines', role: 'teacher' },
  { name: 'Juno', role: 'operator' },
  { name: 'Otis', role: 'observer' },
];
/** Heron's poses: base turn, upper arm, forearm, wrist tilt in degrees (the three lifts sum to −90: vials upright). */
const POSES: [name: string, degrees: [number, number, number, number], gripper: number, tags: string[]][] = [
  ['Perch', [0, 100, -125, -65], 1, ['rest']],
  ['Hand clear', [0, 80, -85, -85], 1, ['rest']],
  ['Above tray', [-18.4, 52, -78, -64], 1, ['tray']],
  ['In tray A1', [-18.4, 38, -76, -52], 0.62, ['tray']],
  ['Above scale', [34.7, 55, -84, -61], 0.36, ['scale']],
  ['On scale', [34.7, 41, -82, -49], 0.36, ['scale']],
];

export interface DemoSignIn {
  name: string;
  role: Role;
  email: string;
  password: string;
}

const fileOf = (dataFolder: string) => join(dataFolder, 'demo-sign-ins.json');

/** Fills an empty data folder with the demo workshop; passwords are drawn at random and kept beside it. */
export async function seedDemo(context: Context, dataFolder: string): Promise<void> {
  if (context.people.any()) return;
  const signIns: DemoSignIn[] = TEAM.map(({ name, role }) => ({
    name,
    role,
    email: `${name.toLowerCase()}@tidemill.example`,
    password: readablePassword(),
  }));
  const hashes = await Promise.all(signIns.map(({ password, email }) => hashNewPassword(password, email)));
  writeFileSync(fileOf(dataFolder), JSON.stringify(signIns, null, 2), { mode: 0o600 });
  chmodSync(fileOf(dataFolder), 0o600);
  context.db.transaction(() => {
    context.workshop.set(WORKSHOP, true);
    for (const [i, { name, role, email }] of signIns.entries())
      context.people.add({ name, role, email, passwordHash: hashes[i]! });
    for (const model of Object.values(DEMO_ARMS)) context.arms.add(model, 'Moss', 'First description');
    seedHeron(context);
  });
}

function seedHeron(context: Context): void {
  const heron = context.arms.list().find((arm) => arm.name === 'Heron')!;
  const poses = context.poses.addAll(
    heron.id,
    POSES.map(([name, degrees, gripper, tags]) => ({
      label: { name, note: '', tags },
      position: {
        q: degrees.map(degToRad),
        gripper,
        trust: 'referenced' as const,
        origin: 'typed' as const,
        by: 'Ines',
        armRevision: heron.revision,
      },
    })),
  );
  const idOf = (name: string) => poses.find((pose) => pose.name === name)!.id;
  const goTo = (id: string, pose: string): Step => ({
    id,
    kind: 'goTo',
    poseId: idOf(pose),
    speed: 'full',
    settle: 0,
  });
  const straightTo = (id: string, pose: string): Step => ({
    id,
    kind: 'straightTo',
    poseId: idOf(pose),
    speed: 'easy',
    settle: 0,
  });
  const steps: Step[] = [
    goTo('s1', 'Hand clear'),
    { id: 's2', kind: 'grip', opening: 0.9 },
    goTo('s3', 'Above tray'),
    straightTo('s4', 'In tray A1'),
    { id: 's5', kind: 'grip', opening: 0.36 },
    straightTo('s6', 'Above tray'),
    goTo('s7', 'Above scale'),
    straightTo('s8', 'On scale'),
    { id: 's9', kind: 'grip', opening: 0.9 },
    { id: 's10', kind: 'wait', seconds: 2 },
    { id: 's11', kind: 'remark', text: 'Juno notes the weight.' },
    straightTo('s12', 'Above scale'),
    goTo('s13', 'Hand clear'),
  ];
  const saved = context.sequences.add(
    heron.id,
    { name: 'Weigh one vial', note: 'From A1 to the scale.', steps },
    'Ines',
  );
  const { fingerprint } = prepare(context.poses, heron, saved);
  context.sequences.approve(heron.id, saved.sequenceId, saved.version, 'Ines', fingerprint);
}

/** What to print at every start on demo data; empty on other data. */
export function demoSignIns(dataFolder: string): DemoSignIn[] {
  const file = fileOf(dataFolder);
  return existsSync(file) ? (JSON.parse(readFileSync(file, 'utf8')) as DemoSignIn[]) : [];
}
