import { parseInput } from '../../../src/file/document.js';
import { parseModel } from '../../../src/source/model-file.js';

/** An invented module of 60 cells, 9.2 A and 41 V. */
const ARRAY_MODEL = `model: single-diode
name: Any
technology: mono-si
cells_in_series: 60
photocurrent_A: 9.2
saturation_current_A: 1.0e-9
ideality_factor: 1.07
series_resistance_ohm: 0.25
shunt_resistance_ohm: 350
alpha_isc_A_per_K: 0.004
`;

export const ARRAY_MODULE = parseModel(parseInput(ARRAY_MODEL, 'module.yaml'));
