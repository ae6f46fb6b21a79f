import type { ClientMessageType } from '../../shared/live/client-messages';

/** Messages of one class that a socket may send: a bucket of `burst`, refilled `perSecond`. */
interface Allowance {
  burst: number;
  perSecond: number;
}

/** OWASP WebSocket cheat sheet asks for limits by class; the figures are our judgement. Stop is exempt. */
const ALLOWANCES = {
  keep: { burst: 40, perSecond: 40 },
  order: { burst: 20, perSecond: 10 },
  malformed: { burst: 10, perSecond: 1 },
} satisfies Record<string, Allowance>;
type RateClass = keyof typeof ALLOWANCES;

export function rateClass(type: ClientMessageType): RateClass | 'exempt' {
  if (type === 'stop' || type === 'hold.end') return 'exempt';
  return type === 'hold.keep' ? 'keep' : 'order';
}

/** Token buckets of one socket. `nowMs` comes from a monotonic clock. */
export class RateLimits {
  private readonly buckets = new Map<RateClass, { tokens: number; atMs: number }>();

  allows(kind: RateClass | 'exempt', nowMs: number): boolean {
    if (kind === 'exempt') return true;
    const { burst, perSecond } = ALLOWANCES[kind];
    const bucket = this.buckets.get(kind) ?? { tokens: burst, atMs: nowMs };
    bucket.tokens = Math.min(burst, bucket.tokens + ((nowMs - bucket.atMs) / 1000) * perSecond);
    bucket.atMs = nowMs;
    this.buckets.set(kind, bucket);
    if (bucket.tokens < 1) return false;
    bucket.tokens -= 1;
    return true;
  }
}
