import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const css = readFileSync(new URL('../../../src/app/styles.css', import.meta.url), 'utf8');
const tokens = new Map(
  [...css.matchAll(/--color-([\w-]+): light-dark\((#[0-9a-f]{6}), (#[0-9a-f]{6})\)/g)].map(([, name, light, dark]) => [
    name,
    { light, dark },
  ]),
);

/** Relative luminance and contrast ratio of WCAG 2.2 (https://www.w3.org/TR/WCAG22/#dfn-contrast-ratio). */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const channel = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}
function contrast(a: string, b: string): number {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (high + 0.05) / (low + 0.05);
}

const SURFACES = ['linen', 'cloth', 'fold', 'indigo-wash'];
const TEXT_PAIRS: Array<[string, string]> = [
  ...['ink', 'faded', 'indigo'].flatMap((text) => SURFACES.map((surface): [string, string] => [text, surface])),
  ...['verdigris', 'weld', 'madder'].flatMap((text) => [...SURFACES, `${text}-wash`].map((surface): [string, string] => [text, surface])),
  ...['verdigris-wash', 'weld-wash', 'madder-wash'].map((surface): [string, string] => ['ink', surface]),
  ['on-indigo', 'indigo'],
  ['on-indigo', 'indigo-deep'],
  ['on-madder', 'madder'],
  ['on-madder', 'madder-deep'],
];
const CONTROL_PAIRS: Array<[string, string]> = ['linen', 'cloth'].flatMap((surface) => [
  ['selvage', surface],
  ['indigo', surface],
]);

describe.each(['light', 'dark'] as const)('the %s palette', (theme) => {
  const color = (name: string) => {
    const token = tokens.get(name);
    if (token === undefined) throw new Error(`no token ${name}`);
    return token[theme];
  };
  it.each(TEXT_PAIRS)('shows %s text on %s with a contrast of at least 4.5:1', (text, surface) => {
    expect(contrast(color(text), color(surface))).toBeGreaterThanOrEqual(4.5);
  });
  it.each(CONTROL_PAIRS)('shows %s outlines on %s with a contrast of at least 3:1', (line, surface) => {
    expect(contrast(color(line), color(surface))).toBeGreaterThanOrEqual(3);
  });
});

describe('the contrast measure', () => {
  it('is 21:1 for black on white, the maximum of WCAG 2.2', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 5);
  });
});
