/** The classes of the first scheme. Each is a *probable cause*; `key` never changes its meaning. */
export const labelSchemeV1 = [
  {
    key: 'crack',
    title: 'crack',
    definition: 'Fracture of the solid: a sudden onset and a ring-down, often with energy far above 20 kHz.',
    confusedWith: 'twin, vessel-tick, electrical (which has no ring-down)',
    glyph: '◆',
  },
  {
    key: 'crackle',
    title: 'crackle',
    definition: 'Fracture bursts that overlap too densely to be counted one by one.',
    confusedWith: 'bubble in a dense series, machine',
    glyph: '▓',
  },
  {
    key: 'twin',
    title: 'twin',
    definition: 'Deformation twinning of a metal: sharp bursts under strain, often in series of like bursts.',
    confusedWith: 'crack',
    glyph: '◇',
  },
  {
    key: 'detachment',
    title: 'detached',
    definition: 'The solid comes off its substrate or the wall.',
    confusedWith: 'crack, vessel-tick',
    glyph: '⌇',
  },
  {
    key: 'bubble',
    title: 'bubble',
    definition: 'Boiling, release of gas, or cavitation: rounder onset, mostly low frequencies.',
    confusedWith: 'detachment, handling',
    glyph: '○',
  },
  {
    key: 'vessel-tick',
    title: 'vessel',
    definition: 'A container or fixture that contracts or expands with temperature.',
    confusedWith: 'crack; it goes on after the sample is solid and comes in control runs too',
    glyph: '△',
  },
  {
    key: 'handling',
    title: 'handling',
    definition: 'A knock, a tripod, a door, a cable that is moved.',
    confusedWith: 'vessel-tick, detachment',
    glyph: '□',
  },
  {
    key: 'machine',
    title: 'machine',
    definition: 'A compressor, pump, fan, valve or relay.',
    confusedWith: 'electrical, vessel-tick',
    glyph: '▤',
  },
  {
    key: 'electrical',
    title: 'electrical',
    definition: 'A spike of one or a few samples without acoustic ring-down.',
    confusedWith: 'crack at a low sample rate',
    glyph: '╎',
  },
  {
    key: 'voice',
    title: 'voice',
    definition: 'Somebody speaks, calls or coughs. Marking it holds the recording for a reviewer.',
    confusedWith: 'machine with a changing pitch',
    glyph: '●',
  },
  {
    key: 'unsure',
    title: 'unsure',
    definition: 'Something sounded, and its cause cannot be told from this recording.',
    confusedWith: 'everything: say in the note what speaks for what',
    glyph: '?',
  },
] as const;

/** A mark of this class raises a finding and holds the recording. */
export const voiceClassKey = 'voice';
