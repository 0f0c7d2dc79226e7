import { physicalText } from './physical-text.js';
import type { Column, Section } from './product.js';
import { QUANTITIES } from './quantity.js';
import type { Sink } from './sink.js';
import { TextWriter } from './text-writer.js';
import type { ByteWriter } from './binary-sink.js';

/**
 * Comma-separated values after RFC 4180, with a header line: for each column the physical value
 * and, beside it, the code. Nothing needs quoting. One file for each section.
 */
export function csvSink(open: (section: Section) => ByteWriter): Sink {
  let text = new TextWriter(() => undefined);
  let cells: readonly ((code: number) => string)[] = [];
  return {
    beginSection(section) {
      text = new TextWriter(open(section));
      cells = section.columns.map(cellFor);
      text.write(`${section.columns.map(headingFor).join(',')}\r\n`);
    },
    record(codes) {
      let line = '';
      for (let column = 0; column < cells.length; column++) {
        line += (column === 0 ? '' : ',') + cells[column]!(codes[column]!);
      }
      text.write(`${line}\r\n`);
    },
    endSection() {
      text.flush();
    },
    end: () => undefined,
  };
}

const isCount = ({ quantity }: Column): boolean => QUANTITIES[quantity].unit === '';

function headingFor(column: Column): string {
  if (isCount(column)) return column.name;
  const unit = UNIT_SUFFIXES[QUANTITIES[column.quantity].unit];
  return `${column.name}_${unit},${column.name}_code`;
}

// As in the input files.
const UNIT_SUFFIXES: Readonly<Record<string, string>> = {
  s: 's',
  'W/m2': 'W_per_m2',
  C: 'C',
  V: 'V',
  A: 'A',
  W: 'W',
};

function cellFor(column: Column): (code: number) => string {
  if (isCount(column)) return String;
  const physical = physicalText(column.quantizer.format);
  return (code) => `${physical(code)},${code}`;
}
