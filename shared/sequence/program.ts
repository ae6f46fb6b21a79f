import { z } from 'zod';

/**
 * A program is a sequence made ready to run: poses looked up, "again" unrolled, remarks left out.
 * The arm process runs programs and knows nothing of poses or sequences. `path` is the step's
 * number as people read it ("3.2"), `stepId` the step it came from. q: rad (m for sliding joints).
 */
export const ProgramStep = z.discriminatedUnion('kind', [
  z.strictObject({
    kind: z.literal('goTo'),
    stepId: z.string(),
    path: z.string(),
    q: z.array(z.number()),
    /** The tool takes the straight way instead of the joints. */
    straight: z.boolean(),
    /** Share of each joint's own speed limit; the ceiling still applies. */
    speed: z.number().min(0.01).max(1),
    settle: z.number().min(0),
    /** Goes on into the next step within this distance of the pose, m; 0 = stands there. */
    blend: z.number().min(0),
    /** The pose's name, for people. */
    label: z.string(),
  }),
  z.strictObject({
    kind: z.literal('grip'),
    stepId: z.string(),
    path: z.string(),
    opening: z.number().min(0).max(1),
  }),
  z.strictObject({
    kind: z.literal('wait'),
    stepId: z.string(),
    path: z.string(),
    seconds: z.number().min(0),
  }),
]);
export type ProgramStep = z.infer<typeof ProgramStep>;

export const Program = z.strictObject({
  runId: z.string(),
  sequenceId: z.string(),
  sequenceName: z.string(),
  version: z.int(),
  steps: z.array(ProgramStep),
  /** Whether this very program has been watched through one held cycle on this arm. */
  proven: z.boolean(),
  /** Same steps, same poses, same arm: the same fingerprint. */
  fingerprint: z.string(),
});
export type Program = z.infer<typeof Program>;
