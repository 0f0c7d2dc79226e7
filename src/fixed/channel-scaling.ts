import { Fault } from '../fault.js';
import type { CodedQuantity } from './coded-quantity.js';
import type { PinScaling } from './converter-codes.js';

/** The ways to say what stands between a quantity and the pin of a converter. */
export interface ChannelFields {
  /** Measured voltage over pin voltage. */
  readonly divider?: number | undefined;
  /** Pin voltage over measured voltage. */
  readonly gain?: number | undefined;
  readonly gain_V_per_A?: number | undefined;
  readonly shunt_ohm?: number | undefined;
  /** Goes with shunt_ohm; 1 if absent. */
  readonly amplifier?: number | undefined;
  readonly gain_V_per_W?: number | undefined;
  readonly gain_V_per_W_per_m2?: number | undefined;
  readonly gain_V_per_C?: number | undefined;
}

/**
 * The scaling of a channel, from the one field that fits its quantity.
 * @throws Fault FORMAT, with the name of the field where there is one, if a field belongs to another
 * quantity, if none or two are given, or if there is an amplifier without a shunt.
 */
export function channelScaling(fields: ChannelFields, quantity: CodedQuantity): PinScaling {
  const fitting = FITTING_FIELDS[quantity];
  const expected = `a ${quantity} channel takes ${fitting.join(' or ')}`;
  if (fitting.length === 0) throw channelFault(`no converter measures ${quantity}`);
  const given = ALL_FIELDS.filter((name) => fields[name] !== undefined);
  const foreign = given.find((name) => !fitting.includes(name));
  if (foreign !== undefined) throw channelFault(`does not fit: ${expected}`, foreign);
  const [field, second] = given;
  if (second !== undefined) throw channelFault(`must not stand beside ${given[0]!}`, second);
  if (fields.amplifier !== undefined && field !== 'shunt_ohm') {
    throw channelFault('must stand beside shunt_ohm', 'amplifier');
  }
  if (field === undefined) throw channelFault(`the scaling is missing: ${expected}`);
  const factor = fields[field]!;
  if (field === 'divider') return { dividerRatio: factor };
  return { gain: field === 'shunt_ohm' ? factor * (fields.amplifier ?? 1) : factor };
}

type ScalingField = Exclude<keyof ChannelFields, 'amplifier'>;

const FITTING_FIELDS: Readonly<Record<CodedQuantity, readonly ScalingField[]>> = {
  voltage: ['divider', 'gain'],
  current: ['gain_V_per_A', 'shunt_ohm'],
  power: ['gain_V_per_W'],
  irradiance: ['gain_V_per_W_per_m2'],
  temperature: ['gain_V_per_C'],
  time: [],
};

const ALL_FIELDS = Object.values(FITTING_FIELDS).flat();

function channelFault(what: string, field?: string): Fault {
  const problem = { code: 'FORMAT', message: `${what}.` };
  return new Fault('input', field === undefined ? problem : { ...problem, field });
}
