/** What the scene draws from: joint values in rad and m, the gripper from 0 to 1. */
export interface SceneSample {
  t: number;
  q: readonly number[];
  stopAt: readonly number[];
  gripper: number | null;
  tool: { position: [number, number, number] };
  target?: readonly number[];
  truth?: readonly number[];
}
export interface SceneSource {
  sample(): SceneSample | null;
  /** Calls back on every new sample; returns the unsubscribe function. */
  subscribe(listener: () => void): () => void;
}
