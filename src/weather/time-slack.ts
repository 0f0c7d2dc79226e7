/**
 * How much earlier than a boundary, as a part of the time, that boundary counts as reached.
 *
 * Decimal times meet only up to rounding: 0.1 + 0.2 is above 0.3, and 3 * 0.3 is below 0.9. Each
 * level of nesting adds at most 7 roundings of 2^-53 (the sum and the product of durations, the
 * start, the seam, the difference), and a file has at most 16 levels around a table of 4: 147
 * roundings, and a few more in the durations and the sample time as given. 2^-45 is 256 of them,
 * and still 0.1 ns in an hour.
 */
export const TIME_SLACK = 2.842170943040401e-14;
