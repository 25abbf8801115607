/** First match wins: most browsers also name those they descend from. */
const browsers: readonly (readonly [RegExp, string])[] = [
  [/Edg(?:e|A|iOS)?\/(\d+)/, 'Edge'],
  [/OPR\/(\d+)/, 'Opera'],
  [/(?:Firefox|FxiOS)\/(\d+)/, 'Firefox'],
  [/(?:HeadlessChrome|Chrome|CriOS)\/(\d+)/, 'Chrome'],
  [/Version\/(\d+).*Safari\//, 'Safari'],
];

const systems: readonly (readonly [RegExp, string])[] = [
  [/Android/, 'Android'],
  [/iPhone|iPad/, 'iOS'],
  [/Windows/, 'Windows'],
  [/Mac OS X/, 'macOS'],
  [/Linux/, 'Linux'],
];

/** "Firefox 140 on Linux", made from what the browser calls itself; unknown ones stay as they are. */
export function browserName(userAgent: string): string {
  const browser = browsers.find(([pattern]) => pattern.test(userAgent));
  if (!browser) return userAgent || 'unknown';
  const version = browser[0].exec(userAgent)?.[1];
  const system = systems.find(([pattern]) => pattern.test(userAgent))?.[1];
  return `${browser[1]} ${version}${system ? ` on ${system}` : ''}`;
}
