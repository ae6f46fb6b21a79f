export { type WorstTorque, worstGravityTorques } from './worst-gravity';
