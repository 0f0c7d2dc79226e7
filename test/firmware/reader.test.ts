import { expect, test } from 'vitest';
import { HP } from './c-library.js';
import { buildCurveSet, buildFile, seal, type Section, table } from './image-builder.js';
import { smallCurveSet, smallTimeline, timelineRows, twoCurves } from './small-files.js';
import { describeEveryWay } from './ways.js';

describeEveryWay('the reader', (library) => {
  // Check value of CRC-32/ISO-HDLC: published with the algorithm, and in vectors/FORMAT.md.
  test('computes the CRC-32 of IEEE 802.3, in one go or byte by byte', async () => {
    expect(await library().crc(Buffer.from('123456789', 'latin1'))).toBe(0xcbf43926);
    expect(await library().crc(new Uint8Array())).toBe(0);
  });

  test('turns words into numbers and ranks and back, at the ends of the range too', async () => {
    const found = await library().signs([0, 1, 0x7fff_ffff, 0x8000_0000, 0xffff_ffff]);
    expect(found).toEqual([
      { signed: 0, rank: 0x8000_0000, back: 0 },
      { signed: 1, rank: 0x8000_0001, back: 1 },
      { signed: 0x7fff_ffff, rank: 0xffff_ffff, back: 0x7fff_ffff },
      { signed: -0x8000_0000, rank: 0, back: -0x8000_0000 },
      { signed: -1, rank: 0x7fff_ffff, back: -1 },
    ]);
  });

  test('reads every code of every width, and refuses the row behind the last', async () => {
    await openChecked(smallTimeline());
    const columns = [
      [1, 0],
      [2, 0],
      [2, 1],
      [3, 0],
      [6, 0],
    ] as const;
    for (const [k, [quantity, group]] of columns.entries()) {
      expect((await library().column('SAMP', quantity, group)).result).toBe(HP.OK);
      const words = timelineRows.map((row) => ({ result: HP.OK, word: row[k]! >>> 0 }));
      const untouched = { result: HP.RANGE, word: 0xdeadbeef };
      const found = await library().read([0, 1, 2, 3, 0xffff_ffff]);
      expect(found).toEqual([...words, untouched, untouched]);
    }
  });

  test('describes a column: place, sign, scale to the last bit, rounding, name', async () => {
    await openChecked(smallTimeline());
    expect(await library().column('SAMP', 3)).toEqual({
      result: HP.OK,
      description: {
        ...{ rows: 3, stride: 16, storage: 1, signed: true },
        ...{ step: 0.5, origin: -40, width: 7, rounding: 3, overflow: 1 },
        name: 'fifteen_letters',
      },
    });
    const { description } = await library().column('SAMP', 2, 1);
    expect(description).toMatchObject({ step: 0.1, signed: false, name: 'irradiance_1' });
  });

  test('ends a name that the file does not end', async () => {
    const file = Buffer.from(smallTimeline());
    // Two sections, so CHAN starts at 64; the name is at 32 in its record.
    file.fill('x', 64 + 32, 64 + 48);
    await openChecked(seal(file));
    expect((await library().column('SAMP', 1)).description!.name).toBe('x'.repeat(15));
  });

  test('does not find a table, a quantity or a group that is not there', async () => {
    await openChecked(smallTimeline());
    expect((await library().column('POIN', 1)).result).toBe(HP.NOT_FOUND);
    expect((await library().column('SAMP', 4)).result).toBe(HP.NOT_FOUND);
    expect((await library().column('SAMP', 2, 2)).result).toBe(HP.NOT_FOUND);
  });

  test('finds the points and peaks of each curve, and no further curve', async () => {
    await openChecked(smallCurveSet());
    const first = { firstPoint: 0, points: 5, firstPeak: 0, peaks: 2, globalPeak: 1 };
    const second = { firstPoint: 5, points: 3, firstPeak: 2, peaks: 1, globalPeak: 2 };
    expect(await library().curve(0)).toEqual({ result: HP.OK, ...first });
    expect(await library().curve(1)).toEqual({ result: HP.OK, ...second });
    expect(await library().curve(2)).toEqual({ result: HP.RANGE });
  });

  test('refuses to select a curve without points, which a file may hold', async () => {
    const dark = { voltage: [], current: [] };
    await openChecked(buildCurveSet([dark, twoCurves.curves[0]], ...layouts));
    expect(await library().curve(0)).toEqual({ result: HP.EMPTY });
    expect(await library().curve(1)).toMatchObject({ result: HP.OK, firstPoint: 0 });
  });

  test('looks a current up in the curve that is selected', async () => {
    await openChecked(smallCurveSet());
    await library().curve(1);
    // By hand: 440 × 100 / 200 = 220 is the drop half way from 110 to 310.
    const found = await library().currents([0, 20, 110, 210, 310, 311]);
    expect(Array.from(found)).toEqual([450, 450, 440, 220, 0, 0]);
    await library().curve(0);
    expect(Array.from(await library().currents([300]), (word) => word | 0)).toEqual([-3]);
  });

  test('skips sections, quantities and kinds that it does not know', async () => {
    const unknown = table('ZZZZ', [[7]], [{ quantity: 999, ...layouts[0] }]);
    await openChecked(buildFile(77, unknown.channels, [unknown.section]));
    expect(await library().column('ZZZZ', 999)).toMatchObject({ result: HP.OK });
  });

  test('opens a file of the most sections, without records and without columns', async () => {
    const letters = 'ABCDEFGHIJKLMNO'.split('');
    const empty = letters.map(
      (x) => table(`SEC${x}`, [], [{ quantity: 1, ...layouts[0] }]).section,
    );
    await openChecked(buildFile(2, [], empty));
  });

  test('refuses a file of 17 sections, though they follow each other as they must', async () => {
    const letters = 'ABCDEFGHIJKLMNOP'.split('');
    const file = buildFile(
      2,
      [],
      letters.map((x) => section(`SEC${x}`, 4)),
    );
    expect(await library().open(file)).toBe(HP.DIRECTORY);
  });

  test('takes records of 4 to 1024 bytes in steps of 4, and no others', async () => {
    const sizes = [4, 8, 1020, 1024, 2, 6, 1022, 1028];
    const files = sizes.map((size) => buildFile(2, [], [section('SAMP', size)]));
    const found = await Promise.all(files.map((file) => library().open(file)));
    expect(found).toEqual(sizes.map((_, k) => (k < 4 ? HP.OK : HP.DIRECTORY)));
  });

  test('refuses to select a curve whose points or peaks lie outside, checked or not', async () => {
    for (const quantity of [16, 17, 18, 19]) {
      for (const value of [9, 0xffff_fffc]) {
        const file = Buffer.from(smallCurveSet());
        file.writeUInt32LE(value, curve(1, quantity));
        expect(await library().open(seal(file))).toBe(HP.OK);
        expect(await library().curve(1)).toEqual({ result: HP.INDEX });
      }
    }
  });

  const refusals: [what: string, damage: (file: Buffer) => void, open: number, check?: number][] = [
    ['a wrong magic', (file) => file.fill(0x0a, 4, 6), HP.MAGIC],
    ['another format version', (file) => file.writeUInt16LE(2, 8), HP.VERSION],
    ['another header size', (file) => file.writeUInt16LE(36, 10), HP.VERSION],
    ['a length above the true one', (file) => file.writeUInt32LE(file.length + 1, 20), HP.LENGTH],
    ['a length below the true one', (file) => file.writeUInt32LE(file.length - 1, 20), HP.LENGTH],
    ['one section', (file) => file.writeUInt32LE(1, 16), HP.DIRECTORY],
    ['17 sections', (file) => file.writeUInt32LE(17, 16), HP.DIRECTORY],
    ['2^24 + 4 sections', (file) => file.writeUInt32LE(2 ** 24 + 4, 16), HP.DIRECTORY],
    ['a section fewer', (file) => file.writeUInt32LE(3, 16), HP.DIRECTORY],
    ['a lower-case tag', (file) => file.write('curv', entry(1)), HP.DIRECTORY],
    ['a tag of other characters', (file) => file.write('CU[V', entry(1)), HP.DIRECTORY],
    ['a tag that occurs twice', (file) => file.write('POIN', entry(1)), HP.DIRECTORY],
    ['a gap before a section', (file) => add(file, entry(2) + 4, 4), HP.DIRECTORY],
    ['sections that overlap', (file) => add(file, entry(2) + 4, -4), HP.DIRECTORY],
    ['a record size of 0', (file) => file.writeUInt32LE(0, entry(2) + 8), HP.DIRECTORY],
    ['a record size of 6', (file) => file.writeUInt32LE(6, entry(2) + 8), HP.DIRECTORY],
    ['a record size of 1028', (file) => file.writeUInt32LE(1028, entry(2) + 8), HP.DIRECTORY],
    ['a record too many', (file) => add(file, entry(3) + 12, 1), HP.DIRECTORY],
    ['a record too few', (file) => add(file, entry(3) + 12, -1), HP.DIRECTORY],
    ['records beyond 32 bits', (file) => add(file, entry(2) + 12, 2 ** 30), HP.DIRECTORY],
    ['2^32 - 1 records', (file) => file.writeUInt32LE(0xffff_ffff, entry(3) + 12), HP.DIRECTORY],
    [
      'a section behind the end whose size wraps to it',
      (file) => {
        wrapBehind(file, 0);
      },
      HP.DIRECTORY,
    ],
    [
      'a section whose CRC is behind the end',
      (file) => {
        wrapBehind(file, 4);
      },
      HP.DIRECTORY,
    ],
    ['a first section that is not CHAN', (file) => file.write('CHAM', entry(0)), HP.CHANNEL],
    [
      'a column of a section that is not there',
      (file) => file.write('PION', channel(9)),
      HP.CHANNEL,
    ],
    ['a column of CHAN itself', (file) => file.write('CHAN', channel(9)), HP.CHANNEL],
    ['a column that ends outside its record', (file) => add(file, channel(10) + 8, 2), HP.CHANNEL],
    [
      'a column far outside its record',
      (file) => file.writeUInt16LE(65534, channel(9) + 8),
      HP.CHANNEL,
    ],
    ['a column off its alignment', (file) => add(file, channel(9) + 8, 1), HP.CHANNEL],
    ['a storage of 3 bytes', (file) => (file[channel(9) + 10] = 3), HP.CHANNEL],
    ['a storage of 0 bytes', (file) => (file[channel(9) + 10] = 0), HP.CHANNEL],
    ['a width of 0 bits', (file) => (file[channel(9) + 11] = 0), HP.CHANNEL],
    ['a width beyond the storage', (file) => (file[channel(9) + 11] = 17), HP.CHANNEL],
    ['a sign that is neither 0 nor 1', (file) => (file[channel(9) + 7] = 2), HP.CHANNEL],
    [
      'a curve set without voltages',
      (file) => file.writeUInt16LE(6, channel(9) + 4),
      HP.OK,
      HP.NOT_FOUND,
    ],
    ['a first point behind its turn', (file) => add(file, curve(1, 16), 1), HP.OK, HP.INDEX],
    ['a first point before its turn', (file) => add(file, curve(1, 16), -1), HP.OK, HP.INDEX],
    ['a number of points too large', (file) => add(file, curve(1, 17), 1), HP.OK, HP.INDEX],
    [
      'a first and a number that wrap',
      (file) => file.writeUInt32LE(0xffff_fffc, curve(1, 17)),
      HP.OK,
      HP.INDEX,
    ],
    ['a first peak not in turn', (file) => add(file, curve(1, 18), -1), HP.OK, HP.INDEX],
    ['a number of peaks too large', (file) => add(file, curve(1, 19), 1), HP.OK, HP.INDEX],
    [
      'a global peak of another curve',
      (file) => file.writeUInt32LE(1, curve(1, 20)),
      HP.OK,
      HP.INDEX,
    ],
    [
      'a global peak behind the last',
      (file) => file.writeUInt32LE(2, curve(0, 20)),
      HP.OK,
      HP.INDEX,
    ],
    ['a voltage that stays', (file) => file.writeUInt16LE(100, point(2)), HP.OK, HP.ORDER],
    ['a voltage that falls', (file) => file.writeUInt16LE(99, point(2)), HP.OK, HP.ORDER],
    ['a current that rises', (file) => file.writeInt16LE(901, point(1) + 2), HP.OK, HP.ORDER],
    ['a signed current that rises', signedRise, HP.OK, HP.ORDER],
  ];

  test.each(refusals)(
    'refuses %s even where every CRC matches',
    async (...[, damage, open, check]) => {
      const file = Buffer.from(smallCurveSet());
      damage(file);
      const found = await library().inspect(seal(file));
      expect({ open: found.open, check: found.check }).toEqual({ open, check: check ?? CLOSED });
    },
  );

  test('refuses a CHAN section whose records are not 48 bytes long', async () => {
    const bytes = Buffer.from(smallTimeline());
    // Five records of 48 bytes are sixty of 4 bytes.
    bytes.writeUInt32LE(4, entry(0) + 8);
    bytes.writeUInt32LE(60, entry(0) + 12);
    expect(await library().open(seal(bytes))).toBe(HP.CHANNEL);
  });

  test('refuses damage to the header or the directory by their CRC', async () => {
    for (const at of [12, 24, 28, entry(0) + 4, entry(3) + 12]) {
      const file = smallCurveSet();
      file[at]! ^= 0x10;
      expect(await library().open(file)).toBe(HP.HEADER_CRC);
    }
  });

  test('refuses a curve set of another kind where curves are asked for', async () => {
    const file = Buffer.from(smallCurveSet());
    file.writeUInt32LE(2, 12);
    await openChecked(seal(file));
    expect(await library().curve(0)).toEqual({ result: HP.KIND });
  });

  const openChecked = async (file: Uint8Array): Promise<void> => {
    expect(await library().open(file)).toBe(HP.OK);
    expect(await library().check()).toBe(HP.OK);
  };
});

/** What the probe answers while there is nothing to ask. */
const CLOSED = 1;
const layouts = [twoCurves.voltage, twoCurves.current] as const;

const section = (tag: string, recordSize: number): Section => ({
  ...{ tag, recordSize, records: 1, bytes: new Uint8Array(recordSize) },
});

// Offsets in the small curve set: 4 sections, so CHAN starts at 96; 14 channels of 48 bytes.
const entry = (section: number): number => 32 + 16 * section;
const channel = (k: number): number => 96 + 48 * k;
const CURVES = 96 + 48 * 14 + 4;
const curve = (k: number, quantity: number): number => CURVES + 28 * k + 8 + 4 * (quantity - 16);
const point = (k: number): number => CURVES + 28 * 2 + 4 + 4 * k;

// Section 2 ends `beyond` bytes behind the end of the file; section 3 has a size of almost 2^32, so
// that a sum without a check comes out at the end exactly.
function wrapBehind(file: Buffer, beyond: number): void {
  const size = file.length + beyond - 4 - file.readUInt32LE(entry(2) + 4);
  file.writeUInt32LE(4, entry(2) + 8);
  file.writeUInt32LE(size / 4, entry(2) + 12);
  file.writeUInt32LE(file.length + beyond, entry(3) + 4);
  file.writeUInt32LE(4, entry(3) + 8);
  file.writeUInt32LE((2 ** 32 - 4 - beyond) / 4, entry(3) + 12);
}

// From -1 to 0: as words without their sign, these fall.
function signedRise(file: Buffer): void {
  file.writeInt16LE(-1, point(3) + 2);
  file.writeInt16LE(0, point(4) + 2);
}

const add = (file: Buffer, at: number, value: number): number =>
  file.writeUInt32LE((file.readUInt32LE(at) + value) >>> 0, at);
