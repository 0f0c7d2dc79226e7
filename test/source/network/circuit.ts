/**
 * A circuit for a general circuit simulator from an array file, written from the file's text alone:
 * nothing of the project's own solvers is in it. Each substring is current sources, diodes and
 * resistors; a sweep of the terminal voltage gives the current.
 */
import { parse } from 'yaml';
import { thermalVoltage } from '../../../src/quantities.js';
import type { SingleDiode } from '../../../src/source/single-diode.js';

/** The entries of an array file that the circuit needs. */
interface CircuitFile {
  readonly substrings_per_module: number;
  readonly bypass: Conductor | 'none';
  readonly groups: Readonly<Record<string, number>>;
  readonly strings: readonly {
    readonly modules: number;
    readonly shade?: Readonly<Record<string, string | readonly string[]>>;
    readonly deviation_pct?: Readonly<Record<string, number>>;
    readonly blocking?: Conductor;
  }[];
  readonly shaded_cells?: readonly (Where & { count: number; factor: number })[];
  readonly faults?: readonly (Where & {
    bypass?: 'shorted' | 'open';
    open?: boolean;
    cracked?: { count: number; lost_area: number };
  })[];
  readonly reverse?: { bishop: { share: number; exponent: number; breakdown_V: number } };
}

type Conductor =
  { drop_V: number } | { diode: { saturation_A: number; ideality: number; series_ohm: number } };

interface Where {
  readonly string: number;
  readonly module: number;
  readonly substring?: number;
}

/** All diodes are at 25 °C; the simulator's own k / q is that of 2014. */
const TEMPERATURE = 298.15;
const OLD_RATIO = 1.38064852e-23 / 1.6021766208e-19;
const asFactor = (idealityVoltage: number): number => idealityVoltage / (OLD_RATIO * TEMPERATURE);

/**
 * An ideal clamp as a source behind a steep diode, which leaks no more than a microampere. The
 * source makes up for the diode's own drop at 5 A, 0.4 mV; from 0.1 A to 10 A that leaves 0.1 mV.
 * Steeper ones the simulator cannot follow.
 */
const STEEP = { saturation: 1e-6, ideality: 1e-3 };
const OWN_DROP = STEEP.ideality * OLD_RATIO * TEMPERATURE * Math.log1p(5 / STEEP.saturation);

export function circuitOf(
  yaml: string,
  cellAt: (light: number) => SingleDiode,
  cells: number,
  shuntAtStc: number,
  sweep: { readonly to: number; readonly points: number; readonly output: string },
): string {
  const file = parse(yaml) as CircuitFile;
  const lines: string[] = ['* generated from an array file'];
  const models = new Map<string, string>();
  const model = (is: number, n: number): string => {
    const text = `d(is=${is} n=${n})`;
    const name = models.get(text) ?? `m${models.size}`;
    models.set(text, name);
    return name;
  };
  let next = 0;
  const node = (): string => `n${++next}`;
  const id = (): number => ++next;
  const conductor = (from: string, to: string, how: Conductor): void => {
    if ('drop_V' in how) {
      const middle = node();
      lines.push(`V${id()} ${from} ${middle} ${how.drop_V - OWN_DROP}`);
      lines.push(`D${id()} ${middle} ${to} ${model(STEEP.saturation, STEEP.ideality)}`);
      return;
    }
    const { saturation_A, ideality, series_ohm } = how.diode;
    const middle = series_ohm > 0 ? node() : from;
    if (series_ohm > 0) lines.push(`R${id()} ${from} ${middle} ${series_ohm}`);
    const voltage = ideality * thermalVoltage(TEMPERATURE);
    lines.push(`D${id()} ${middle} ${to} ${model(saturation_A, asFactor(voltage))}`);
  };
  const cellsAt = (
    plus: string,
    minus: string,
    count: number,
    light: number,
    area: number,
    photo: number,
  ): void => {
    const d = cellAt(light);
    const junction = node();
    lines.push(`I${id()} ${minus} ${junction} ${d.photocurrent * area * photo}`);
    const a = count * d.idealityVoltage;
    lines.push(`D${id()} ${junction} ${minus} ${model(d.saturationCurrent * area, asFactor(a))}`);
    if (d.shuntConductance > 0) {
      lines.push(`R${id()} ${junction} ${minus} ${count / (d.shuntConductance * area)}`);
    }
    if (file.reverse !== undefined) {
      const { share, exponent, breakdown_V } = file.reverse.bishop;
      const u = `v(${junction},${minus})/${count}`;
      // Held off the pole, which the sweep never reaches but a first guess may.
      const left = `max(1-${u}/(${breakdown_V}),1e-3)`;
      const factor = share * shuntAtStc * area;
      lines.push(`B${id()} ${junction} ${minus} I=${factor}*${u}*exp(-${exponent}*ln(${left}))`);
    }
    lines.push(`R${id()} ${junction} ${plus} ${(count * d.seriesResistance) / area}`);
  };
  file.strings.forEach((string, index) => {
    const here = (file.faults ?? []).filter((fault) => fault.string === index + 1);
    if (here.some(({ open }) => open === true)) return;
    let bottom = '0';
    for (let module = 1; module <= string.modules; module++) {
      for (let substring = 1; substring <= file.substrings_per_module; substring++) {
        const top = node();
        const isHere = (where: Where): boolean =>
          where.string === index + 1 && where.module === module && where.substring === substring;
        const shade = string.shade?.[module] ?? Object.keys(file.groups)[0]!;
        const name = typeof shade === 'string' ? shade : shade[substring - 1]!;
        const light = file.groups[name]!;
        const photo = 1 + (string.deviation_pct?.[module] ?? 0) / 100;
        const odd = [
          ...(file.shaded_cells ?? [])
            .filter(isHere)
            .map(({ count, factor }) => ({ count, light: light * factor, area: 1 })),
          ...here
            .filter((fault) => isHere(fault) && fault.cracked !== undefined)
            .map(({ cracked }) => ({ count: cracked!.count, light, area: 1 - cracked!.lost_area })),
        ];
        let minus = bottom;
        for (const { count, light: lit, area } of odd) {
          const plus = node();
          cellsAt(plus, minus, count, lit, area, photo);
          minus = plus;
        }
        const rest = cells - odd.reduce((sum, { count }) => sum + count, 0);
        cellsAt(top, minus, rest, light, 1, photo);
        const fault = here.find((each) => isHere(each) && each.bypass !== undefined);
        if (fault?.bypass === 'shorted') lines.push(`V${id()} ${top} ${bottom} 0`);
        else if (fault === undefined && file.bypass !== 'none') {
          conductor(bottom, top, file.bypass);
        }
        bottom = top;
      }
    }
    if (string.blocking === undefined) lines.push(`V${id()} ${bottom} out 0`);
    else conductor(bottom, 'out', string.blocking);
  });
  const step = sweep.to / (sweep.points - 1);
  return [
    ...lines,
    ...[...models].map(([text, name]) => `.model ${name} ${text}`),
    'Vout out 0 0',
    '.options temp=25 tnom=25 reltol=1e-7 abstol=1e-12 vntol=1e-9 gmin=1e-13 itl1=2000 itl2=2000',
    '.control',
    'set numdgt=15',
    'set wr_singlescale',
    `dc Vout 0 ${sweep.to} ${step}`,
    `wrdata ${sweep.output} i(Vout)`,
    'quit 0',
    '.endc',
    '.end',
    '',
  ].join('\n');
}
