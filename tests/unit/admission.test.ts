import { describe, expect, it } from 'vitest';
import { admit } from '../../server/live/admission';
import { RateLimits } from '../../server/live/rate-limits';

const frame = (text: string) => Buffer.from(text);
const keep = (seq: number) => frame(JSON.stringify({ type: 'hold.keep', holdId: 'h', seq, seenT: 1 }));

describe('admit', () => {
  it.each([
    ['not JSON', '{"type":'],
    ['an unknown type', '{"type":"motors.fly","id":"1"}'],
    ['an unknown field', '{"type":"stop","id":"1","evil":true}'],
    ['a number that overflows', '{"type":"nudge","id":"1","turn":1,"frame":"joint","axis":0,"amount":1e999}'],
    ['NaN as text', '{"type":"nudge","id":"1","turn":1,"frame":"joint","axis":0,"amount":NaN}'],
    ['null for a number', '{"type":"ceiling.set","id":"1","turn":1,"fraction":null}'],
    ['a polluted prototype', '{"type":"stop","id":"1","__proto__":{"role":"owner"}}'],
    ['a list', '[1,2,3]'],
    [
      'a joint that cannot be',
      '{"type":"hold.start","id":"1","turn":1,"holdId":"h","motion":{"kind":"reference","joint":99}}',
    ],
  ])('refuses %s with a reason', (_what, text) => {
    const admission = admit(frame(text), false, 'owner', new RateLimits(), 0);
    expect(admission).toMatchObject({ kind: 'refused', refusal: { code: 'badMessage' } });
  });

  it('refuses binary frames', () => {
    expect(admit(frame('{"type":"stop","id":"1"}'), true, 'owner', new RateLimits(), 0).kind).toBe('refused');
  });

  it('lets an observer stop the arm and do nothing else', () => {
    const stop = frame('{"type":"stop","id":"1"}');
    const take = frame('{"type":"control.take","id":"2"}');
    expect(admit(stop, false, 'observer', new RateLimits(), 0).kind).toBe('admitted');
    expect(admit(take, false, 'observer', new RateLimits(), 0)).toMatchObject({
      kind: 'refused',
      refusal: { id: '2', code: 'notAllowed' },
    });
  });

  it('lets only the owner take control by force', () => {
    const force = frame('{"type":"control.take","id":"2","force":true}');
    expect(admit(force, false, 'builder', new RateLimits(), 0).kind).toBe('refused');
    expect(admit(force, false, 'owner', new RateLimits(), 0).kind).toBe('admitted');
  });

  it('admits 20 keeps a second for as long as they come, and never limits a stop', () => {
    const limits = new RateLimits();
    for (let i = 0; i < 2000; i++)
      expect(admit(keep(i), false, 'operator', limits, i * 50).kind).toBe('admitted');
    for (let i = 0; i < 500; i++)
      expect(admit(frame('{"type":"stop","id":"s"}'), false, 'operator', limits, 100_000).kind).toBe(
        'admitted',
      );
  });

  it('refuses a burst of orders, then gives up on a socket that only sends nonsense', () => {
    const limits = new RateLimits();
    const order = frame('{"type":"control.take","id":"o"}');
    const kinds = Array.from({ length: 40 }, () => admit(order, false, 'operator', limits, 0));
    expect(kinds.filter((k) => k.kind === 'admitted').length).toBe(20);
    const nonsense = Array.from({ length: 12 }, () => admit(frame('x'), false, 'operator', limits, 0).kind);
    expect(nonsense.at(-1)).toBe('hopeless');
  });
});
