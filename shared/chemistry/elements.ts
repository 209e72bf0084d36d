/** An isotope beside the main one: mass difference in u from the main isotope, abundance with the main isotope = 100. */
export interface MinorIsotope {
  readonly massDifference: number;
  readonly relativeAbundance: number;
}

export interface Element {
  readonly symbol: string;
  readonly name: string;
  readonly atomicNumber: number;
  /** Mass of the most abundant isotope, u. */
  readonly monoisotopicMass: number;
  /** Abridged standard atomic weight, u (conventional value where an interval is published). */
  readonly standardWeight: number;
  /** Valence that unsaturation and implicit hydrogens are counted with. */
  readonly defaultValence: number;
  /** Default valence first, then the higher states of S and P. */
  readonly valences: readonly number[];
  readonly minorIsotopes: readonly MinorIsotope[];
}

const element = (
  symbol: string,
  name: string,
  atomicNumber: number,
  monoisotopicMass: number,
  standardWeight: number,
  valences: readonly [number, ...number[]],
  minorIsotopes: ReadonlyArray<readonly [massDifference: number, relativeAbundance: number]> = [],
): Element => ({
  symbol,
  name,
  atomicNumber,
  monoisotopicMass,
  standardWeight,
  defaultValence: valences[0],
  valences,
  minorIsotopes: minorIsotopes.map(([massDifference, relativeAbundance]) => ({ massDifference, relativeAbundance })),
});

/**
 * Elements that formulas and structures may contain. Isotopic masses and abundances: NIST/IUPAC table of isotopic
 * compositions; weights: CIAAW abridged standard atomic weights.
 */
export const ELEMENTS: readonly Element[] = [
  element('H', 'hydrogen', 1, 1.00782503223, 1.008, [1], [[1.006277, 0.0115]]),
  element('C', 'carbon', 6, 12, 12.011, [4], [[1.003355, 1.0816]]),
  element('N', 'nitrogen', 7, 14.00307400443, 14.007, [3], [[0.997035, 0.3653]]),
  element(
    'O',
    'oxygen',
    8,
    15.99491461957,
    15.999,
    [2],
    [
      [1.004217, 0.0381],
      [2.004245, 0.2055],
    ],
  ),
  element('F', 'fluorine', 9, 18.99840316273, 18.998403162, [1]),
  element(
    'Si',
    'silicon',
    14,
    27.97692653465,
    28.085,
    [4],
    [
      [0.999568, 5.08],
      [1.996844, 3.353],
    ],
  ),
  element('P', 'phosphorus', 15, 30.97376199842, 30.973761998, [3, 5]),
  element(
    'S',
    'sulfur',
    16,
    31.9720711744,
    32.06,
    [2, 4, 6],
    [
      [0.999388, 0.79],
      [1.995796, 4.474],
      [3.99501, 0.011],
    ],
  ),
  element('Cl', 'chlorine', 17, 34.968852682, 35.45, [1], [[1.99705, 31.996]]),
  element('Br', 'bromine', 35, 78.9183376, 79.904, [1], [[1.997952, 97.278]]),
  element('I', 'iodine', 53, 126.9044719, 126.90447, [1]),
];

/**
 * Elements that occur in adducts only, never in a structure. Masses: NIST (¹¹B is the main isotope of boron);
 * abundance of ⁴¹K from memory of the same table (6.7302 / 93.2581).
 */
export const ADDUCT_ELEMENTS: readonly Element[] = [
  element('B', 'boron', 5, 11.00930536, 10.81, [3], [[-0.996368, 24.84]]),
  element('Na', 'sodium', 11, 22.989769282, 22.989769, [1]),
  element('K', 'potassium', 19, 38.9637064864, 39.098, [1], [[1.998119, 7.217]]),
];

/** Rest mass of the electron, u (NIST/CODATA). */
export const ELECTRON_MASS = 0.000548579909;

const bySymbol = new Map(ELEMENTS.map((entry) => [entry.symbol, entry]));
const byNumber = new Map(ELEMENTS.map((entry) => [entry.atomicNumber, entry]));

export const SUPPORTED_SYMBOLS: readonly string[] = ['C', 'H', 'N', 'O', 'S', 'P', 'F', 'Cl', 'Br', 'I', 'Si'];

/** Element by symbol, or null when structures may not contain it. */
export function findElement(symbol: string): Element | null {
  return bySymbol.get(symbol) ?? null;
}

/**
 * Element by atomic number.
 *
 * @throws RangeError for an element that structures may not contain: graphs are checked when they are made.
 */
export function elementOf(atomicNumber: number): Element {
  const found = byNumber.get(atomicNumber);
  if (found === undefined) throw new RangeError(`No supported element has atomic number ${atomicNumber}`);
  return found;
}
