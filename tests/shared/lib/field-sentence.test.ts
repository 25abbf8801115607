import { describe, expect, it } from 'vitest';
import { fieldName, fieldSentence } from '../../../shared/lib/field-sentence.ts';

describe('what is wrong with a field', () => {
  it('is a sentence that begins with its name, once', () => {
    expect(fieldSentence({ path: 'dueAt', message: 'cannot lie in the past' })).toBe(
      'Due at cannot lie in the past.',
    );
    expect(fieldSentence({ path: 'labId', message: 'cannot change' })).toBe('Lab cannot change.');
    expect(fieldSentence({ path: 'file', message: 'is needed.' })).toBe('File is needed.');
    expect(fieldSentence({ path: '', message: 'has more than 20 fields' })).toBe(
      'The input has more than 20 fields.',
    );
  });

  it('names places inside a list, units and headers so that they are found', () => {
    expect(['spans.0.endSample', 'lowHz', 'Upload-Metadata', 'runOffsetNs'].map(fieldName)).toEqual([
      'Spans 0 end sample',
      'Low Hz',
      'Upload-Metadata',
      'Run offset ns',
    ]);
  });
});
