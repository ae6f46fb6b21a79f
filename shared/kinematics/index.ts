export {
  type Chain,
  type ChainJoint,
  type ChainModel,
  type ChainOrigin,
  compileChain,
  type RigidBody,
  STANDARD_GRAVITY,
  type Vec3,
} from './chain';
export { composeTransforms, emptyTransform, forwardKinematics, linkFrames, type Transform } from './frames';
export { type IkListOptions, listInverseKinematics } from './ik-list';
export type { IkTask } from './ik-task';
export { type IkOptions, type IkResult, solveInverseKinematics } from './inverse';
export { jacobian } from './jacobian';
export {
  followLine,
  type LineOptions,
  type LinePath,
  type LineRefusal,
  type LineResult,
  sampleLine,
} from './line';
export type { LineTarget } from './line-task';
export { fastestPointSpeed, lowestPoint, pointPlaces, radiusAboutJoint, reachOf, worstReach } from './points';
export { seededRandom } from './random';
export { rotationAbout, rotationFromRpy, rotationVector } from './rotation';
export { type Dexterity, dexterity, singularValuesOf } from './singular-values';
export { type TiltAxis, tiltAxisOf, toolTilt } from './tilt';
export { type ToolAxis, type ToolFrame, type ToolKeeps, toolAxisOffer, toolLine } from './tool-axes';
