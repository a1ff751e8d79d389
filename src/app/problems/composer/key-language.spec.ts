import { callAround } from './key-language';

describe('callAround', () => {
  const at = (marked: string) => {
    const call = callAround(marked.replace('|', ''), marked.indexOf('|'));
    return call && { name: call.name, argument: call.argument };
  };

  it('finds the innermost call and the argument', () => {
    expect(at('photonProbability(coherent(|), 0)')).toEqual({ name: 'coherent', argument: 0 });
    expect(at('photonProbability(coherent(2), |)')).toEqual({ name: 'photonProbability', argument: 1 });
    expect(at('beamSplitter(product(vacuum(), fock(1)), 0.5|)')).toEqual({ name: 'beamSplitter', argument: 1 });
  });

  it('looks through brackets and lists', () => {
    expect(at('exp(-(1 - T|))')).toEqual({ name: 'exp', argument: 0 });
    expect(at('mixture([0.5, 0.5|], x)')).toEqual({ name: 'mixture', argument: 0 });
    expect(at('mixture([0.5, 0.5], x|)')).toEqual({ name: 'mixture', argument: 1 });
  });

  it('finds none outside a call', () => {
    expect(at('1 + |nbar')).toBeNull();
    expect(at('coherent(2) + |')).toBeNull();
  });
});
