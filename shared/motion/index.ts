/** The motion part of the public maths API: outside programs import it from here. */

export { blendPaths } from './blend';
export { type JointPath, jointPath } from './joint-path';
export { lineWords } from './line-words';
export { alongPath, type MotionPath, type PathCaps, pathLimits, pathMoves, pathRates } from './path';
export { planPosition } from './position';
export { type AxisLimits, type AxisState, type Phase, type Profile, sampleProfile } from './profile';
export { planSynchronised } from './synchronised';
export { LINE_SPEED_M_S, type LineEnd, straightPath, type ToolPath, toolPath } from './tool-path';
export { planVelocity, restPosition } from './velocity';
