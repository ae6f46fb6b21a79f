/** One line of the benchmark. Times in µs. */
export interface Measurement {
  name: string;
  median: number;
  p99: number;
  /** What it is compared with, in the same run. */
  baseline: string;
  /** Median as a multiple of the baseline's median. */
  ratio: number;
  /** Other figures: success rates and the like. */
  notes: Record<string, number>;
}

const now = () => Number(process.hrtime.bigint()) / 1000;

/** Sorted times of `runs` calls, each repeated `inner` times and averaged, after a warm-up; µs. */
export function timesOf(call: (k: number) => void, runs: number, inner: number): Float64Array {
  for (let k = 0; k < Math.min(2000, runs * inner); k++) call(k);
  const times = new Float64Array(runs);
  for (let run = 0; run < runs; run++) {
    const start = now();
    for (let k = 0; k < inner; k++) call(run * inner + k);
    times[run] = (now() - start) / inner;
  }
  return times.sort();
}

export const quantile = (sorted: Float64Array, share: number): number =>
  sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!;
