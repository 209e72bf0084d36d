import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, it } from 'vitest';
import { NumberInput } from '../../../src/components/number-input';

const render = (value: number | null) =>
  renderToStaticMarkup(<NumberInput label="Shift" value={value} unit="ppm" onValueChange={() => undefined} />);

describe('a number field', () => {
  it.each([
    [166.9, 'value="166.9"'],
    [0, 'value="0"'],
    [-4.2, 'value="-4.2"'],
    [null, 'value=""'],
    [Number.NaN, 'value=""'],
  ])('shows %s', (value, markup) => {
    expect(render(value)).toContain(markup);
  });
});
