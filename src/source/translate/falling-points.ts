import type { Fault } from '../../fault.js';
import type { Amperes, Volts } from '../../quantities.js';
import { checkPoints, notCovered, type CurvePoints } from './curve-points.js';

/**
 * Measured points as a curve whose current falls strictly with voltage, so that it can be read both
 * ways. Points whose noise makes the current rise are pooled with their neighbours to their mean:
 * the least squares among falling curves (pool adjacent violators; Ayer and others 1955, from
 * memory). Points that fall already stay as they are, to the last bit.
 *
 * Between points it is straight: off by h² |I''| / 8 for points h volts apart.
 */
export class FallingPoints {
  readonly #pools: readonly Pool[];

  /** @throws Fault `ARGUMENT` as of `checkPoints`. */
  constructor(points: CurvePoints, field?: string) {
    checkPoints(points, field);
    this.#pools = fallingPools(points);
  }

  /**
   * Where the curve crosses the current axis.
   * @throws Fault `NOT_COVERED` where all points lie on one side of it.
   */
  get shortCircuitCurrent(): Amperes {
    const [first, last] = [this.#pools[0]!, this.#pools.at(-1)!];
    if (first.from > 0 || last.to < 0) {
      throw notCovered('short circuit (0 V)', 'V', first.from, last.to);
    }
    const after = this.#pools.findIndex(({ to }) => to >= 0);
    const pool = this.#pools[after]!;
    if (pool.from <= 0) return pool.current;
    const before = this.#pools[after - 1]!;
    return straight(0, before.to, before.current, pool.from, pool.current);
  }

  /**
   * Where the curve crosses the voltage axis.
   * @throws Fault `NOT_COVERED` where all points lie on one side of it.
   */
  get openCircuitVoltage(): Volts {
    const voltage = this.voltageAt(0);
    if (voltage === undefined) throw this.beyond('open circuit (0 A)');
    return voltage;
  }

  /** A Fault `NOT_COVERED` for currents beyond the points. */
  beyond(what: string): Fault {
    return notCovered(what, 'A', this.#pools.at(-1)!.current, this.#pools[0]!.current);
  }

  /** The voltage at a current; undefined beyond the points. */
  voltageAt(current: Amperes): Volts | undefined {
    const pools = this.#pools;
    if (!(current <= pools[0]!.current && current >= pools.at(-1)!.current)) return undefined;
    let low = 0;
    let high = pools.length - 1;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if (pools[middle]!.current >= current) low = middle;
      else high = middle;
    }
    const [before, after] = [pools[low]!, pools[high]!];
    if (current === before.current) return before.voltage;
    return straight(current, before.current, before.voltage, after.current, after.voltage);
  }
}

/** Neighbouring points that share their mean current. */
interface Pool {
  readonly from: Volts;
  readonly to: Volts;
  readonly count: number;
  /** Means. */
  readonly voltage: Volts;
  readonly current: Amperes;
}

function fallingPools({ voltage, current }: CurvePoints): Pool[] {
  const order = Array.from({ length: voltage.length }, (_, index) => index).sort(
    (a, b) => voltage[a]! - voltage[b]! || current[b]! - current[a]!,
  );
  const pools: Pool[] = [];
  for (const index of order) {
    const v = voltage[index]!;
    let pool: Pool = { from: v, to: v, count: 1, voltage: v, current: current[index]! };
    for (let last = pools.at(-1); last !== undefined && last.current <= pool.current;) {
      pool = joined(last, pool);
      pools.pop();
      last = pools.at(-1);
    }
    pools.push(pool);
  }
  return pools;
}

function joined(a: Pool, b: Pool): Pool {
  const count = a.count + b.count;
  const share = b.count / count;
  return {
    from: a.from,
    to: b.to,
    count,
    voltage: a.voltage + (b.voltage - a.voltage) * share,
    current: a.current + (b.current - a.current) * share,
  };
}

/** On the line through two points; exact at both. */
function straight(x: number, x1: number, y1: number, x2: number, y2: number): number {
  const part = (x - x1) / (x2 - x1);
  return part < 0.5 ? y1 + (y2 - y1) * part : y2 - (y2 - y1) * (1 - part);
}
