import { useId, type KeyboardEvent } from 'react';
import { depictStructure, type Depiction, type DrawnAtom, type Point } from './depiction';
import type { AtomHalo, StructureDrawingProps } from './structure-drawing';

const FONT_SIZE = 14;
/** Advance widths of the letters in em, close enough to place hydrogens beside them. */
const LETTER_WIDTH: Readonly<Record<string, number>> = {
  N: 0.65,
  O: 0.68,
  C: 0.57,
  S: 0.54,
  P: 0.58,
  F: 0.52,
  I: 0.27,
  Cl: 0.83,
  Br: 0.94,
  Si: 0.79,
  H: 0.66,
};
const PADDING = 6;
/** A small molecule is not blown up beyond this. */
const LARGEST_SCALE = 1.25;

const halfWidth = (symbol: string) => ((LETTER_WIDTH[symbol] ?? 0.6) * FONT_SIZE) / 2;
const chargeText = (charge: number) => `${Math.abs(charge) > 1 ? Math.abs(charge) : ''}${charge > 0 ? '+' : '\u2212'}`;

const cache = new Map<string, Depiction | null>();
const CACHE_SIZE = 2000;

function tryToDepict(smiles: string): Depiction | null {
  try {
    return depictStructure(smiles);
  } catch {
    // Not a SMILES: the caller shows the text itself instead of a drawing.
    return null;
  }
}

/** Layout of a SMILES, kept because lists draw the same structures again and again; null = unreadable. */
function depict(smiles: string): Depiction | null {
  const known = cache.get(smiles);
  if (known !== undefined) return known;
  const depiction = tryToDepict(smiles);
  if (cache.size >= CACHE_SIZE) cache.delete(cache.keys().next().value ?? '');
  cache.set(smiles, depiction);
  return depiction;
}

/** The charge beside, above or below its letter, wherever there is room. */
function ChargeSign({ atom, baseline, reach }: { atom: DrawnAtom; baseline: number; reach: number }) {
  const { x, y } = atom.chargeDirection;
  const isBeside = Math.abs(x) > 0.5;
  // Beside, hydrogens on the same side are passed; above and below, the sign is centred.
  const isPastHydrogens = atom.hydrogens > 0 && ((x > 0 && atom.hydrogenSide === 'right') || (x < 0 && atom.hydrogenSide === 'left'));
  const distance = isPastHydrogens ? reach : halfWidth(atom.symbol) + 0.5;
  return (
    <text
      x={isBeside ? atom.x + Math.sign(x) * distance : atom.x}
      y={baseline + (isBeside ? (y < 0 ? -0.42 : 0.4) : Math.sign(y) * 0.8) * FONT_SIZE}
      fontSize={FONT_SIZE * 0.74}
      textAnchor={isBeside ? (x > 0 ? 'start' : 'end') : 'middle'}
    >
      {chargeText(atom.charge)}
    </text>
  );
}

function AtomLetters({ atom }: { atom: DrawnAtom }) {
  if (!atom.isLabelled) return null;
  const baseline = atom.y + FONT_SIZE * 0.34;
  const offset = halfWidth(atom.symbol) + 0.5;
  const hydrogens =
    atom.hydrogens === 0 ? null : (
      <>
        H
        {atom.hydrogens > 1 ? (
          <tspan fontSize={FONT_SIZE * 0.68} dy={FONT_SIZE * 0.2}>
            {atom.hydrogens}
          </tspan>
        ) : null}
      </>
    );
  const side = atom.hydrogenSide;
  const x = side === 'right' ? atom.x + offset : side === 'left' ? atom.x - offset : atom.x - halfWidth('H');
  const y = side === 'up' ? baseline - FONT_SIZE * 0.92 : side === 'down' ? baseline + FONT_SIZE * 0.92 : baseline;
  const hydrogenWidth = atom.hydrogens === 0 ? 0 : halfWidth('H') * 2 + (atom.hydrogens > 1 ? FONT_SIZE * 0.36 : 0);
  return (
    <>
      <text x={atom.x} y={baseline} textAnchor="middle">
        {atom.symbol}
      </text>
      {hydrogens === null ? null : (
        <text x={x} y={y} textAnchor={side === 'left' ? 'end' : 'start'}>
          {hydrogens}
        </text>
      )}
      {atom.charge === 0 ? null : (
        <ChargeSign atom={atom} baseline={baseline} reach={offset + (side === 'left' || side === 'right' ? hydrogenWidth : 0)} />
      )}
    </>
  );
}

/** The wave across an open bond that marks an attachment point. */
function attachmentWave(atom: DrawnAtom, neighbour: Point): string {
  const length = Math.hypot(atom.x - neighbour.x, atom.y - neighbour.y) || 1;
  const across = { x: -(atom.y - neighbour.y) / length, y: (atom.x - neighbour.x) / length };
  const along = { x: (atom.x - neighbour.x) / length, y: (atom.y - neighbour.y) / length };
  const at = (step: number, bend: number) =>
    `${(atom.x + across.x * step + along.x * bend).toFixed(2)} ${(atom.y + across.y * step + along.y * bend).toFixed(2)}`;
  return `M${at(-8, 0)} Q${at(-6, -3.4)} ${at(-4, 0)} T${at(0, 0)} T${at(4, 0)} T${at(8, 0)}`;
}

function Halos({ depiction, halos }: { depiction: Depiction; halos: readonly AtomHalo[] }) {
  return halos.map((halo, index) => {
    const members = new Set(halo.atoms);
    return (
      <g
        key={index}
        style={{ color: `var(--color-${halo.tone})` }}
        opacity={halo.isFaint === true ? 0.16 : 0.32}
        stroke="currentColor"
        fill="currentColor"
      >
        {depiction.bonds.map((bond, position) => {
          const a = depiction.atoms[bond.begin];
          const b = depiction.atoms[bond.end];
          if (a === undefined || b === undefined || !members.has(bond.begin) || !members.has(bond.end)) return null;
          return <line key={position} x1={a.x} y1={a.y} x2={b.x} y2={b.y} strokeWidth={12} />;
        })}
        {halo.atoms.map((atom) => {
          const point = depiction.atoms[atom];
          return point === undefined ? null : <circle key={atom} cx={point.x} cy={point.y} r={11} stroke="none" />;
        })}
      </g>
    );
  });
}

/** The drawing itself; in its own chunk because it brings the chemistry library along. */
export function StructureSvg({
  smiles,
  width = 200,
  height = 150,
  alt,
  hasAtomNumbers = false,
  halos = [],
  onAtomHover,
  onAtomClick,
  atomActionLabel,
  className,
}: StructureDrawingProps) {
  const titleId = useId();
  const depiction = depict(smiles);
  if (depiction === null) {
    return (
      <p
        className="flex items-center justify-center overflow-hidden p-2 text-center font-mono text-small break-all text-faded"
        style={{ width, height, maxWidth: '100%' }}
      >
        {smiles}
      </p>
    );
  }
  const { bounds, atoms, bonds } = depiction;
  const room = PADDING + (hasAtomNumbers ? 9 : 0);
  const scale = Math.min(width / (bounds.width + 2 * room), height / (bounds.height + 2 * room), LARGEST_SCALE);
  const view = { width: width / scale, height: height / scale };
  const left = bounds.left + bounds.width / 2 - view.width / 2;
  const top = bounds.top + bounds.height / 2 - view.height / 2;
  const strokeWidth = Math.max(1.5, 1.15 / scale);
  const isInteractive = onAtomHover !== undefined || onAtomClick !== undefined;
  return (
    <svg
      role={onAtomClick === undefined ? 'img' : 'group'}
      aria-labelledby={titleId}
      viewBox={`${left} ${top} ${view.width} ${view.height}`}
      width={width}
      height={height}
      className={className}
      style={{ maxWidth: '100%', height: 'auto' }}
      fontFamily="var(--font-sans)"
      fontSize={FONT_SIZE}
      fill="currentColor"
      onPointerLeave={onAtomHover === undefined ? undefined : () => onAtomHover(null)}
    >
      <title id={titleId}>{alt ?? `Structure ${smiles}`}</title>
      <Halos depiction={depiction} halos={halos} />
      <g stroke="currentColor" strokeWidth={strokeWidth} strokeLinecap="round" fill="none">
        {bonds.flatMap((bond, index) =>
          bond.lines.map(([a, b], line) => <line key={`${index}-${line}`} x1={a.x} y1={a.y} x2={b.x} y2={b.y} />),
        )}
        {atoms.map((atom, index) => {
          if (!atom.isAttachment) return null;
          const bond = bonds.find((candidate) => candidate.begin === index || candidate.end === index);
          const neighbour = bond === undefined ? undefined : atoms[bond.begin === index ? bond.end : bond.begin];
          return neighbour === undefined ? (
            <circle key={index} cx={atom.x} cy={atom.y} r={4} />
          ) : (
            <path key={index} d={attachmentWave(atom, neighbour)} />
          );
        })}
      </g>
      {atoms.map((atom, index) => (
        <AtomLetters key={index} atom={atom} />
      ))}
      {hasAtomNumbers
        ? atoms.map((atom, index) => {
            const distance = atom.isLabelled ? 15 : 10;
            return atom.isAttachment ? null : (
              <text
                key={index}
                x={atom.x + atom.gap.x * distance}
                y={atom.y + atom.gap.y * distance + 3.2}
                textAnchor="middle"
                fontSize={9.5}
                fill="var(--color-faded)"
              >
                {index + 1}
              </text>
            );
          })
        : null}
      {isInteractive
        ? atoms.map((atom, index) => {
            const target = {
              cx: atom.x,
              cy: atom.y,
              r: 13,
              fill: 'transparent',
              ...(onAtomHover === undefined ? {} : { onPointerEnter: () => onAtomHover(index) }),
            };
            if (onAtomClick === undefined) return <circle key={index} {...target} onPointerLeave={() => onAtomHover?.(null)} />;
            const onKeyDown = (event: KeyboardEvent) => {
              if (event.key !== 'Enter' && event.key !== ' ') return;
              event.preventDefault();
              onAtomClick(index);
            };
            return (
              <circle
                key={index}
                {...target}
                role="button"
                tabIndex={0}
                aria-label={atomActionLabel?.(index, atom.name) ?? `${atom.name} ${index + 1}`}
                className="cursor-pointer focus-visible:stroke-indigo focus-visible:outline-none"
                strokeWidth={2}
                onClick={() => onAtomClick(index)}
                onKeyDown={onKeyDown}
                onFocus={() => onAtomHover?.(index)}
                onBlur={() => onAtomHover?.(null)}
              />
            );
          })
        : null}
    </svg>
  );
}
