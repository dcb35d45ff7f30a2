import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  fieldNames,
  merge,
  mergeFields,
  missingFields,
  unknownFields,
  type MergeValues,
} from '../../../shared/features/messages/letter.rules';

const values: MergeValues = {
  name: 'Ngô Thị Hằng',
  given_name: 'Hằng',
  event: 'Lattices',
  dates: '5–7 July 2027',
  place: 'Tarnholt',
  talks: '',
  abstract_due: null,
  own_page: 'http://x/home',
};

describe('merge fields', () => {
  it.each([
    ['Dear {{name}}', 'Dear Ngô Thị Hằng'],
    ['{{ given_name }}, {{given_name}}', 'Hằng, Hằng'],
    ['no field, {single}, {{{event}}}', 'no field, {single}, {Lattices}'],
  ])('%s', (text, expected) => expect(merge(text, values)).toBe(expected));

  it('names what is unknown and what this reader lacks', () => {
    expect(unknownFields('{{nickname}} {{name}} {{}} {{nickname}}')).toEqual(['nickname', '']);
    expect(missingFields('{{talks}} {{abstract_due}} {{name}} {{talks}}', values)).toEqual([
      'talks',
      'abstract_due',
    ]);
    expect(() => merge('{{talks}}', values)).toThrow('no value for {{talks}}');
    expect(() => merge('{{nickname}}', values)).toThrow('no value for {{nickname}}');
  });

  it('does not fill in fields that stand in a value, nor dollar signs of a replacement', () => {
    expect(merge('{{event}}', { ...values, event: 'On {{name}} and $& $1' })).toBe('On {{name}} and $& $1');
  });

  it('fills every text that has neither unknown nor missing fields, and refuses every other', () => {
    const piece = fc.oneof(
      fc.string(),
      fc.constantFrom(...mergeFields).map((field) => `{{${field}}}`),
      fc.constantFrom('{{', '}}', '{{x}}', '{{{'),
    );
    fc.assert(
      fc.property(
        fc.array(piece).map((pieces) => pieces.join('')),
        (text) => {
          const whole = unknownFields(text).length === 0 && missingFields(text, values).length === 0;
          if (whole) expect(merge(text, values)).not.toContain('undefined');
          else expect(() => merge(text, values)).toThrow('no value');
        },
      ),
    );
  });

  it('has a name for each field', () =>
    expect(mergeFields.every((field) => fieldNames[field].length > 0)).toBe(true));
});
