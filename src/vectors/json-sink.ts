import type { ByteWriter } from './binary-sink.js';
import type { Column, Product } from './product.js';
import { QUANTITIES } from './quantity.js';
import type { Sink } from './sink.js';
import { TextWriter } from './text-writer.js';

/**
 * JSON (RFC 8259): what the columns mean, then one array of codes for each record.
 * physical = origin + code * step, in the unit of the column.
 */
export function jsonSink(product: Product, write: ByteWriter): Sink {
  const text = new TextWriter(write);
  const heading = { name: product.name, kind: product.kind };
  text.write(`{\n  ${JSON.stringify(heading).slice(1, -1)},\n  "sections": [`);
  let sections = 0;
  let records = 0;
  return {
    beginSection(section) {
      const { tag, noun, count } = section;
      text.write(`${sections++ === 0 ? '' : ','}\n    {\n`);
      text.write(`      "tag": ${JSON.stringify(tag)}, "record": ${JSON.stringify(noun)}, `);
      text.write(`"count": ${count},\n      "columns": [\n`);
      text.write(section.columns.map((column) => `        ${describe(column)}`).join(',\n'));
      text.write('\n      ],\n      "codes": [');
      records = 0;
    },
    record(codes) {
      text.write(`${records++ === 0 ? '' : ','}\n        [${codes.join(', ')}]`);
    },
    endSection() {
      text.write('\n      ]\n    }');
    },
    end() {
      text.write('\n  ]\n}\n');
      text.flush();
    },
  };
}

function describe({ name, quantity, group, quantizer }: Column): string {
  const { bits, signed, step, origin, label } = quantizer.format;
  const { unit } = QUANTITIES[quantity];
  return JSON.stringify({ name, quantity, unit, group, format: label, bits, signed, step, origin });
}
