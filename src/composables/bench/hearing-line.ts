/** Where hearing ends and the two pictures meet. */
export const HEARING_LINE_HZ = 20_000;
