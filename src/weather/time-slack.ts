/**
 * How much earlier than a boundary, as a part of the time, that boundary counts as reached.
 *
 * Decimal times meet only up to rounding: 0.1 + 0.2 is above 0.3, and 3 * 0.3 is below 0.9. Each
 * level of nesting adds at most 7 roundings of 2^-53 (the sum and the product of durations, the
 * start, the seam, the difference), and there are at most 21 levels: the file, 16 nested blocks and
 * 4 in a trapezoid table. That makes 147 roundings, and a few more in the times as given. 2^-45 is
 * 256 of them, and still 0.1 ns in an hour.
 */
export const TIME_SLACK = 2.842170943040401e-14;
