/** What codes can stand for. Inside the code temperatures are kelvins; codes count Celsius. */
export type CodedQuantity = 'voltage' | 'current' | 'power' | 'irradiance' | 'temperature' | 'time';

/** Units for labels, plain ASCII because labels end up in C comments. */
export const CODED_UNITS: Readonly<Record<CodedQuantity, string>> = {
  voltage: 'V',
  current: 'A',
  power: 'W',
  irradiance: 'W/m2',
  temperature: 'degC',
  time: 's',
};
