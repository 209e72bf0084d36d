// @ts-check

/** @typedef {{ license?: string, dev?: boolean }} LockedPackage */
/** @typedef {{ name: string, licence: string | null, isShipped: boolean }} LicensedPackage */

/** SPDX identifiers that may be shipped without further thought: permissive code, fonts, data. */
const shippable = new Set([
  'MIT',
  'MIT-0',
  'ISC',
  'BSD-2-Clause',
  'BSD-3-Clause',
  '0BSD',
  'Apache-2.0',
  'BlueOak-1.0.0',
  'CC0-1.0',
  'Unlicense',
  'Zlib',
  'OFL-1.1',
]);

/** LGPL, unmodified, outside of every bundle and replaceable in node_modules: its conditions are kept. */
const shippedWithConditions = new Map([['mariadb', 'LGPL-2.1-or-later']]);

/** Not even as a tool: copyleft that reaches what it touches, and licences that forbid commerce. */
const forbiddenEverywhere = /(^|[^L])A?GPL|\bNC\b|SSPL|BUSL|UNLICENSED/i;

/**
 * @param {readonly LicensedPackage[]} packages
 * @returns {string[]} one line a problem
 */
export function findLicenceProblems(packages) {
  return packages.flatMap(({ name, licence, isShipped }) => {
    if (licence === null) return [`${name}: no licence given`];
    if (shippedWithConditions.get(name) === licence) return [];
    const isFine = isShipped ? isShippable(licence) : !forbiddenEverywhere.test(licence);
    return isFine ? [] : [`${name}: ${licence} ${isShipped ? 'cannot be shipped' : 'is not used here, not even as a tool'}`];
  });
}

/**
 * SPDX expressions as packages write them: one choice of an OR is enough, every part of an AND is needed.
 * @param {string} expression
 * @returns {boolean}
 */
function isShippable(expression) {
  const bare = expression.replace(/^\((.*)\)$/, '$1');
  if (bare.includes(' OR ')) return bare.split(' OR ').some(isShippable);
  if (bare.includes(' AND ')) return bare.split(' AND ').every(isShippable);
  return shippable.has(bare.trim());
}
