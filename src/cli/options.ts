import { InvalidArgumentError } from '@commander-js/extra-typings';

/** A parser for numeric options within a range, for messages with the option's name. */
export const numberOption =
  (least: number, most: number, unit: string) =>
  (text: string): number => {
    const value = Number(text);
    if (text.trim() === '' || !(value >= least && value <= most)) {
      throw new InvalidArgumentError(`Expected a number from ${least} to ${most}${unit}.`);
    }
    return value;
  };

export const wholeOption =
  (least: number, most: number) =>
  (text: string): number => {
    const value = numberOption(least, most, '')(text);
    if (!Number.isInteger(value)) throw new InvalidArgumentError('Expected a whole number.');
    return value;
  };
