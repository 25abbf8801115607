/** Upper limit of human hearing: what lies at or above it is called ultrasonic. Source: IEC 60050-801, from memory. */
export const HEARING_LINE_HZ = 20_000;
