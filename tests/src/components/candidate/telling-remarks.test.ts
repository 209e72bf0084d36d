import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Remark } from '../../../../src/components/candidate/remarks.js';
import { tellingRemarks } from '../../../../src/components/candidate/telling-remarks.js';

const remark: fc.Arbitrary<Remark> = fc.record({
  kind: fc.constantFrom('stereo' as const, 'plausibility' as const, 'fit' as const, 'signal' as const),
  tone: fc.constantFrom('supports' as const, 'doubts' as const, 'notes' as const),
  text: fc.string(),
  atoms: fc.constant([]),
});
const make = (tone: Remark['tone'], text: string, kind: Remark['kind'] = 'fit'): Remark => ({ kind, tone, text, atoms: [] });

describe('the remarks shown where there is room for few', () => {
  it('let both sides speak before mere notes', () => {
    const remarks = [
      make('notes', 'one stereocentre', 'stereo'),
      make('supports', 'ester fits'),
      make('supports', 'ring fits'),
      make('doubts', 'singlet unexplained'),
    ];
    expect(tellingRemarks(remarks, 2).map(({ text }) => text)).toEqual(['singlet unexplained', 'ester fits']);
  });

  it('never drop a doubt or a support in favour of a note', () => {
    fc.assert(
      fc.property(fc.array(remark), fc.integer({ min: 1, max: 5 }), (remarks, most) => {
        const shown = tellingRemarks(remarks, most);
        expect(shown).toHaveLength(Math.min(most, remarks.length));
        const weighty = remarks.filter(({ tone }) => tone !== 'notes').length;
        expect(shown.filter(({ tone }) => tone !== 'notes')).toHaveLength(Math.min(most, weighty));
      }),
    );
  });
});
