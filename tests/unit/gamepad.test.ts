import { describe, expect, it } from 'vitest';
import { PAD, type PadReading, type PadState, padAtRest, readPad } from '../../src/live/gamepad';

const pad = (enabled: boolean, x: number, changedAtMs = 0): PadReading => ({
  buttons: Array.from({ length: 16 }, (_, i) => i === PAD.enable && enabled),
  x,
  y: 0,
  changedAtMs,
});
const neutral: PadState = readPad(padAtRest, pad(false, 0), 0);

describe('a game controller', () => {
  it('moves nothing until it has been neutral once', () => {
    expect(readPad(padAtRest, pad(true, 1), 0).direction).toBe(0);
    expect(readPad(readPad(padAtRest, pad(true, 1), 0), pad(true, 1), 20).direction).toBe(0);
  });
  it('moves while the enabling button and the stick are both held', () => {
    const armed = readPad(neutral, pad(true, 0), 10);
    const moving = readPad(armed, pad(true, -0.8), 20);
    expect(moving.direction).toBe(-1);
    expect(readPad(moving, pad(true, -0.5), 30).direction).toBe(-1);
  });
  it.each([
    ['the enabling button is up', pad(false, 0.8)],
    ['the stick is back', pad(true, 0)],
    ['the stick jumps to the other side', pad(true, -0.8)],
    ['the pad is gone', null],
  ])('stops when %s, and needs neutral again', (_what, reading) => {
    const moving = readPad(readPad(neutral, pad(true, 0), 0), pad(true, 0.8), 10);
    const after = readPad(moving, reading, 20);
    expect(after.direction).toBe(0);
    expect(readPad(after, pad(true, 0.8), 30).direction).toBe(0);
  });
  it('ignores a stick inside its dead zone', () => {
    expect(readPad(readPad(neutral, pad(true, 0), 0), pad(true, 0.14), 10).direction).toBe(0);
  });
  it('counts a pad that has not changed for ten seconds as frozen', () => {
    const moving = readPad(readPad(neutral, pad(true, 0), 0), pad(true, 0.8, 10), 20);
    expect(readPad(moving, pad(true, 0.8, 10), 9_000).direction).toBe(1);
    expect(readPad(moving, pad(true, 0.8, 10), 10_100).direction).toBe(0);
  });
});
