/** What a column of a vector file can mean. The numbers are part of the file format. */
export const QUANTITIES = {
  time: { id: 1, unit: 's' },
  irradiance: { id: 2, unit: 'W/m2' },
  cellTemperature: { id: 3, unit: 'C' },
  voltage: { id: 4, unit: 'V' },
  current: { id: 5, unit: 'A' },
  power: { id: 6, unit: 'W' },
  shortCircuitCurrent: { id: 7, unit: 'A' },
  openCircuitVoltage: { id: 8, unit: 'V' },
  peakVoltage: { id: 9, unit: 'V' },
  peakCurrent: { id: 10, unit: 'A' },
  peakPower: { id: 11, unit: 'W' },
  firstPoint: { id: 16, unit: '' },
  pointCount: { id: 17, unit: '' },
  firstPeak: { id: 18, unit: '' },
  peakCount: { id: 19, unit: '' },
  globalPeak: { id: 20, unit: '' },
} as const;

export type QuantityName = keyof typeof QUANTITIES;

const byId = new Map<number, QuantityName>(
  Object.entries(QUANTITIES).map(([name, { id }]) => [id, name as QuantityName]),
);

export const quantityOfId = (id: number): QuantityName | undefined => byId.get(id);
