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
export { jacobian } from './jacobian';
export { fastestPointSpeed, radiusAboutJoint, worstReach } from './points';
export { rotationAbout, rotationFromRpy, rotationVector } from './rotation';
export { type Dexterity, dexterity, singularValuesOf } from './singular-values';
