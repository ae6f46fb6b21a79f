import { setConsoleFunction } from 'three';

/**
 * @react-three/fiber 9 still makes a THREE.Clock, which three announces as deprecated on every page; nothing
 * here can be done about it. Everything else three has to say goes to the console as it always does.
 */
const CLOCK = 'THREE.Clock: This module has been deprecated';

setConsoleFunction((type, message, ...rest) => {
  if (type === 'warn' && String(message).startsWith(CLOCK)) return;
  console[type](message, ...rest);
});
