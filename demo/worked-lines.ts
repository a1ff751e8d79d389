import type { GivenValues } from '@shared/variants';

/** What students write on their pages, by problem and part: `{name}` is a given, `{answer}` what they answered. */
const ways: Readonly<Record<string, readonly (readonly string[])[]>> = {
  'light-of-a-lamp c': [
    ['‹n(n-1)› = 2 n²   (geometric law)', 'g2 = ‹n(n-1)› / ‹n›²', 'n = {nbar}  cancels', 'g2 = {answer}'],
    ['P(n) = n^n / (1+n)^(n+1)', 'sum n(n-1)P(n) = 2·{nbar}²', 'so g2 = {answer}'],
  ],
  'two-outputs b': [
    ['β = √(1−T) α   at output 2', '|β|² = (1−{T})·{nbar}', 'still coherent → Poisson', 'P(0) = e^(−|β|²) = {answer}'],
    ['R = 1 − {T}', 'mean at 2:  R·{nbar}', 'P(0) = exp(−mean)', '= {answer}'],
    ['output 2 is vacuum with', 'P = |‹0|β›|²', '= {answer}'],
  ],
  'two-quanta-meet a': [
    ['|1,1› → both through:  T = {T}', 'both turned:  i·i·R = −R', 'amplitude  T − R', 'P = (T−R)² = {answer}'],
    ['two ways, cannot be told apart', 'A = {T} − (1−{T})', 'P = A² = {answer}'],
    ['P = T·T + R·R', 'T = {T}', 'P = {answer}'],
  ],
  'squeezed-behind-a-loss b': [
    ['x_out = √η x_in + √(1−η) x_v', 'Var x_in = ½ e^(−2·{r})', 'Var x_v = ½', 'Var x_out = {answer}'],
    ['a → √η a + √(1−η) v,  v in vacuum', 'V = η e^(−2r)/2 + (1−η)/2', 'η = {eta}', 'V = {answer}'],
    ['squeezed:  e^(−2r) with r = {r}', '{eta} gets through, rest is vacuum', 'V = {answer}'],
  ],
  'a-field-that-dies-away b': [
    ['n(t) = n0 e^(−κt) + nb (1 − e^(−κt))', 'κt = {decay}', 'n0 = {alpha}²', 'n = {answer}'],
  ],
  'the-noise-of-an-amplifier c': [['a → √G a + √(G−1) v†', 'Var x = G/2 + (G−1)/2', 'G = {G}', 'Var x = {answer}']],
};

/** The lines of one student's page. */
export function workedLines(
  problem: string,
  label: string,
  givens: GivenValues,
  answer: string,
  way: number,
): string[] {
  const own = ways[`${problem} ${label}`] ?? [['by the formula of the notes', '= {answer}']];
  const lines = own[way % own.length] ?? [];
  return lines.map((line) =>
    line.replace(/\{(\w+)\}/g, (_, name: string) =>
      name === 'answer' ? answer || '?' : (givens[name]?.printed ?? '?'),
    ),
  );
}
