const BROWSERS: ReadonlyArray<readonly [RegExp, string]> = [
  [/Edg\//, 'Edge'],
  [/Firefox\//, 'Firefox'],
  [/Chrom(e|ium)\//, 'Chromium or Chrome'],
  [/Safari\//, 'Safari'],
];
const SYSTEMS: ReadonlyArray<readonly [RegExp, string]> = [
  [/Android/, 'Android'],
  [/iPhone|iPad/, 'iOS'],
  [/Windows/, 'Windows'],
  [/Mac OS X/, 'macOS'],
  [/Linux/, 'Linux'],
];

const firstMatch = (text: string, table: ReadonlyArray<readonly [RegExp, string]>) => table.find(([pattern]) => pattern.test(text))?.[1];

/** Browser and system from a user-agent header, in words; the header itself when nothing is known. */
export function describeBrowser(userAgent: string): string {
  const browser = firstMatch(userAgent, BROWSERS);
  const system = firstMatch(userAgent, SYSTEMS);
  if (browser === undefined) return userAgent === '' ? 'Unknown program' : userAgent.slice(0, 60);
  return system === undefined ? browser : `${browser} on ${system}`;
}
