import type { KeyFunction } from '@shared/key-language';

/** The functions in whose name, line, arguments or heading all words stand; those named so come first. */
export function findFunctions(functions: readonly KeyFunction[], search: string): readonly KeyFunction[] {
  const words = search.toLowerCase().split(/\s+/).filter(Boolean);
  if (words.length === 0) return functions;
  const found = functions.filter((each) => {
    const text = [
      each.signature,
      each.summary,
      each.group,
      ...each.arguments.map(({ name, domain }) => `${name} ${domain}`),
      each.example?.expression ?? '',
    ]
      .join('\n')
      .toLowerCase();
    return words.every((word) => text.includes(word));
  });
  const isNamed = ({ name }: KeyFunction) => words.some((word) => name.toLowerCase().includes(word));
  return [...found.filter(isNamed), ...found.filter((each) => !isNamed(each))];
}
