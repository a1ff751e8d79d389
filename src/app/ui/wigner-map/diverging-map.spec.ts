import { colourOf, pixelsOf, readColour } from './diverging-map';

const colours = { negative: [200, 0, 100], zero: [250, 250, 240], positive: [0, 100, 130] } as const;

describe('the diverging map', () => {
  it('has zero in its middle and the ends at ±1, whatever lies beyond', () => {
    expect(colourOf(0, colours)).toEqual(colours.zero);
    expect(colourOf(1, colours)).toEqual(colours.positive);
    expect(colourOf(-3, colours)).toEqual(colours.negative);
  });

  it('puts the lowest row at the foot', () => {
    const pixels = pixelsOf([1000, 0, 0, -1000], 2, 1000, colours);
    expect([...pixels.slice(8, 11)]).toEqual([...colours.positive]);
    expect([...pixels.slice(4, 7)]).toEqual([...colours.negative]);
  });

  it('reads the tokens’ colours', () => {
    expect(readColour(' #0b6e86')).toEqual([11, 110, 134]);
    expect(readColour('teal')).toBeUndefined();
  });
});
