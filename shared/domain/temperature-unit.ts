/** Units of temperature that can be counted with, and how people write them. */
const aliases: Record<'°C' | 'K' | '°F', RegExp> = {
  '°C': /^(°\s*c|c|deg\s*c|degc|celsius|degrees? celsius|℃)$/i,
  K: /^(k|kelvin)$/i,
  '°F': /^(°\s*f|f|deg\s*f|degf|fahrenheit|℉)$/i,
};
export type TemperatureUnit = keyof typeof aliases;
export const temperatureUnits = Object.keys(aliases) as TemperatureUnit[];

/** The unit that is meant, or `null` where it is none of a temperature. */
export function temperatureUnitOf(text: string): TemperatureUnit | null {
  return temperatureUnits.find((unit) => aliases[unit].test(text.trim())) ?? null;
}

export function toCelsius(value: number, unit: TemperatureUnit): number {
  if (unit === 'K') return value - 273.15;
  return unit === '°F' ? ((value - 32) * 5) / 9 : value;
}
