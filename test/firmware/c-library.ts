/**
 * The firmware library as tests see it, whichever way it was compiled. Words are unsigned 32-bit
 * numbers; results are those of `enum hp_result`.
 */
export class CLibrary {
  constructor(
    readonly name: string,
    private readonly port: Port,
  ) {}

  /** hp_open, and the file stays open for the calls below. */
  open(file: Uint8Array): Promise<number> {
    return this.port.open(file);
  }

  /** hp_check of the open file. */
  async check(): Promise<number> {
    return (await this.call(PROBE.check, []))[0]! | 0;
  }

  /** hp_curve_at; the curve stays selected for {@link currents}. */
  async curve(index: number): Promise<{ result: number } & Partial<CurveRows>> {
    const [word, firstPoint, points, firstPeak, peaks, globalPeak] = await this.call(PROBE.curve, [
      index,
    ]);
    const result = word! | 0;
    if (result !== 0) return { result };
    return {
      result,
      firstPoint: firstPoint!,
      points: points!,
      firstPeak: firstPeak!,
      peaks: peaks!,
      globalPeak: globalPeak!,
    };
  }

  /** hp_curve_current of the selected curve at each voltage. */
  currents(voltages: ArrayLike<number>): Promise<Uint32Array> {
    return this.call(PROBE.currents, voltages);
  }

  /** hp_interpolate of each five: v0, i0, v1, i1, v. */
  interpolate(fives: readonly (readonly number[])[]): Promise<Uint32Array> {
    return this.call(PROBE.interpolate, fives.flat());
  }

  /** hp_find_column and hp_describe; the column stays selected for {@link read}. */
  async column(tag: string, quantity: number, group = 0): Promise<ColumnAnswer> {
    const tagWord = Buffer.from(tag, 'latin1').readUInt32LE();
    const words = await this.call(PROBE.column, [tagWord, quantity, group]);
    const result = words[0]! | 0;
    if (result !== 0) return { result };
    const [rows, stride, storage, signed] = words.subarray(1);
    const [stepHigh, stepLow, originHigh, originLow, width, rounding, overflow] = words.subarray(5);
    const name = Buffer.from(words.subarray(12, 28)).toString('latin1').replace(/\0.*$/s, '');
    return {
      result,
      description: {
        ...{ rows: rows!, stride: stride!, storage: storage!, signed: signed === 1 },
        ...{ step: toDouble(stepHigh!, stepLow!), origin: toDouble(originHigh!, originLow!) },
        ...{ width: width!, rounding: rounding!, overflow: overflow!, name },
      },
    };
  }

  /** hp_read of the selected column at each row. */
  async read(rows: readonly number[]): Promise<{ result: number; word: number }[]> {
    const words = await this.call(PROBE.read, rows);
    return rows.map((_, k) => ({ result: words[2 * k]! | 0, word: words[2 * k + 1]! }));
  }

  /**
   * Opens a file and asks for everything in it, checked or not: results of hp_open and hp_check,
   * and a hash of all answers. check and walk are 1 if hp_open refuses.
   */
  async inspect(file: Uint8Array): Promise<{ open: number; check: number; walk: number }> {
    const [open, check, walk] = await Promise.all([
      this.open(file),
      this.check(),
      this.call(PROBE.walk, []),
    ]);
    return { open, check, walk: walk[0]! };
  }

  /** hp_crc32 of bytes, fed one by one. */
  async crc(bytes: Uint8Array): Promise<number> {
    return (await this.call(PROBE.crc, bytes))[0]!;
  }

  /** hp_signed of each word, and hp_rank and hp_unrank of that. */
  async signs(words: readonly number[]): Promise<{ signed: number; rank: number; back: number }[]> {
    const answer = await this.call(PROBE.signs, words);
    return words.map((_, k) => {
      const [negative, magnitude, rank, back] = answer.subarray(4 * k);
      const signed = negative === 1 ? -1 - magnitude! : magnitude!;
      return { signed, rank: rank!, back: back! | 0 };
    });
  }

  /** Ends the program behind it, if there is one. */
  close(): Promise<void> {
    return this.port.close();
  }

  private call(request: number, words: ArrayLike<number>): Promise<Uint32Array> {
    return this.port.call(request, words);
  }
}

/** A way to the functions of probe.h. Requests are answered in order, also when not awaited. */
export interface Port {
  open(file: Uint8Array): Promise<number>;
  call(request: number, words: ArrayLike<number>): Promise<Uint32Array>;
  close(): Promise<void>;
}

export interface CurveRows {
  readonly firstPoint: number;
  readonly points: number;
  readonly firstPeak: number;
  readonly peaks: number;
  readonly globalPeak: number;
}

export interface ColumnAnswer {
  readonly result: number;
  readonly description?: {
    readonly rows: number;
    readonly stride: number;
    readonly storage: number;
    readonly signed: boolean;
    readonly step: number;
    readonly origin: number;
    readonly width: number;
    readonly rounding: number;
    readonly overflow: number;
    readonly name: string;
  };
}

/** enum hp_result of hillproof.h. */
export const HP = {
  OK: 0,
  LENGTH: -1,
  MAGIC: -2,
  VERSION: -3,
  HEADER_CRC: -4,
  DIRECTORY: -5,
  CHANNEL: -6,
  SECTION_CRC: -7,
  NOT_FOUND: -8,
  KIND: -9,
  RANGE: -10,
  INDEX: -11,
  ORDER: -12,
  EMPTY: -13,
} as const;

/** enum probe_request of probe.h. */
const PROBE = {
  check: 1,
  curve: 2,
  currents: 3,
  interpolate: 4,
  column: 5,
  read: 6,
  walk: 7,
  crc: 8,
  signs: 9,
} as const;

function toDouble(high: number, low: number): number {
  const view = new DataView(new ArrayBuffer(8));
  view.setUint32(0, high);
  view.setUint32(4, low);
  return view.getFloat64(0);
}
