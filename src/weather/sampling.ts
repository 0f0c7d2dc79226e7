import { argumentFault } from '../fault.js';
import type { Seconds } from '../quantities.js';
import { TIME_SLACK } from './time-slack.js';

/** Above this many samples the slack would come near a whole sample. 2^40. */
const MOST_SAMPLES = 1_099_511_627_776;

/**
 * Number of samples at times k * period, k = 0, 1, ..., that lie in [0, duration]: both ends count,
 * so 60 s in steps of 0.1 s give 601. A last sample that passes the end by no more than
 * `TIME_SLACK * duration` (rounding: 0.3 / 0.1 is below 3) counts as well.
 * @param duration Finite, 0 or more.
 * @param period Finite, above 0, and large enough for at most 2^40 samples.
 * @throws Fault `ARGUMENT`.
 */
export function sampleCount(duration: Seconds, period: Seconds): number {
  if (!(duration >= 0 && duration < Infinity)) {
    throw argumentFault('duration', 'a finite time of 0 s or more', duration);
  }
  if (!(period > 0 && period < Infinity)) {
    throw argumentFault('period', 'a finite time above 0 s', period);
  }
  const count = Math.floor((duration / period) * (1 + TIME_SLACK)) + 1;
  if (count > MOST_SAMPLES) {
    const expected = `long enough for at most ${MOST_SAMPLES} samples in ${duration} s`;
    throw argumentFault('period', expected, period);
  }
  return count;
}
