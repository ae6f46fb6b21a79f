import { z } from 'zod';

/** A step's speed: one of the named ceilings or an exact share of each joint's speed limit. */
export const StepSpeed = z.union([z.enum(['creep', 'easy', 'full']), z.number().min(0.01).max(1)]);
export type StepSpeed = z.infer<typeof StepSpeed>;

/** Farther than this from a pose is not at it any more. */
export const MAX_BLEND_M = 0.1;

/** Stable within a sequence, so that a problem or a drag can name its step. */
const StepId = z.string().min(1).max(40);

export const GoToStep = z.strictObject({
  id: StepId,
  kind: z.literal('goTo'),
  poseId: z.string().min(1).max(64),
  speed: StepSpeed,
  /** Time to stand still at the pose before the next step, s. */
  settle: z.number().min(0).max(60).default(0),
  /** How near the tool comes to the pose when it goes on into the next step without standing, m; left out or 0 = it stands there. */
  blend: z.number().min(0).max(MAX_BLEND_M).optional(),
});
/** As Go to, but the tool takes the straight way. */
export const StraightToStep = GoToStep.extend({ kind: z.literal('straightTo') });
export const GripStep = z.strictObject({
  id: StepId,
  kind: z.literal('grip'),
  /** 0 = closed, 1 = fully open. */
  opening: z.number().min(0).max(1),
});
export const WaitStep = z.strictObject({
  id: StepId,
  kind: z.literal('wait'),
  seconds: z.number().min(0).max(3600),
});
export const RemarkStep = z.strictObject({
  id: StepId,
  kind: z.literal('remark'),
  text: z.string().max(500),
});
export const AgainStep = z.strictObject({
  id: StepId,
  kind: z.literal('again'),
  times: z.int().min(1).max(1000),
  get steps() {
    return z.array(Step).max(200);
  },
});

export type GoToStep = z.infer<typeof GoToStep>;
export type StraightToStep = z.infer<typeof StraightToStep>;
export type GripStep = z.infer<typeof GripStep>;
export type WaitStep = z.infer<typeof WaitStep>;
export type RemarkStep = z.infer<typeof RemarkStep>;
export interface AgainStep {
  id: string;
  kind: 'again';
  times: number;
  steps: Step[];
}
export type Step = GoToStep | StraightToStep | GripStep | WaitStep | RemarkStep | AgainStep;
export type StepKind = Step['kind'];
export const Step: z.ZodType<Step> = z.lazy(() =>
  z.discriminatedUnion('kind', [GoToStep, StraightToStep, GripStep, WaitStep, RemarkStep, AgainStep]),
) as unknown as z.ZodType<Step>;

export const STEP_KINDS = ['goTo', 'straightTo', 'grip', 'wait', 'again', 'remark'] as const;

/** How deep "again" may nest, and how long a cycle may get once expanded. */
export const MAX_NESTING = 4;
export const MAX_EXPANDED_STEPS = 5000;
