import type { ToolAxis, ToolFrame, ToolKeeps } from '../../../shared/kinematics';

/** An axis of the tool's motion in words: what it is called, and what its two buttons say. */
export interface ToolAxisWords {
  name: string;
  negative: string;
  positive: string;
  negativeDoing: string;
  positiveDoing: string;
}

const BASE: Record<'x' | 'y' | 'z', [string, string]> = {
  x: ['back', 'ahead'],
  y: ['right', 'left'],
  z: ['down', 'up'],
};

export function toolAxisWords(frame: ToolFrame, axis: ToolAxis): ToolAxisWords {
  const letter = axis.at(-1) as 'x' | 'y' | 'z';
  if (axis.length === 2)
    return {
      name: `Tool about ${frame} ${letter}`,
      negative: 'turn −',
      positive: 'turn +',
      negativeDoing: 'turning −',
      positiveDoing: 'turning +',
    };
  const [negative, positive] = frame === 'base' ? BASE[letter] : [`${letter} −`, `${letter} +`];
  return {
    name: `Tool along ${frame} ${letter}`,
    negative,
    positive,
    negativeDoing: `going ${negative}`,
    positiveDoing: `going ${positive}`,
  };
}

export const KEEPS_WORDS: Record<ToolKeeps, string> = {
  rotation: 'keeps how the tool is turned',
  tilt: 'keeps the tilt of the tool; it turns with the base',
  nothing: 'the tool turns as it must',
};
