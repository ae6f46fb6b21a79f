export { forwardDynamics } from './forward-dynamics';
export { type DynamicsOptions, gravityTorques, inverseDynamics } from './inverse-dynamics';
export { massMatrix } from './mass-matrix';
