/**
 * Messages of the contracts go on where the label ends ("needs at least 12 characters"); others are sentences of
 * their own. Both become a sentence that can be understood without looking at the field.
 */
export function fieldSentence(label: string, message: string | undefined): string | undefined {
  if (!message) return undefined;
  const goesOn = /^\p{Ll}/u.test(message);
  const sentence = goesOn ? `${label} ${message}` : message;
  return /[.!?]$/.test(sentence) ? sentence : `${sentence}.`;
}
