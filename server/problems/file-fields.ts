import { isMap, isScalar, isSeq, type Scalar, type YAMLMap } from 'yaml';

/** A problem file that cannot be read: what is wrong, where, and what would be right. */
export class ProblemFileError extends Error {}

/** A value as it stands in the file: a number keeps its zeros. */
function textOf(node: Scalar): string {
  if (typeof node.value === 'string') return node.value;
  return node.value === null ? '' : (node.source ?? JSON.stringify(node.value));
}

/**
 * The keys of one map in a problem file, read one by one; what nobody asked for is a mistake of the author and is named.
 */
export class FileFields {
  private readonly asked = new Set<string>();

  constructor(
    private readonly node: YAMLMap,
    private readonly what: string,
    private readonly lineOf: (offset: number) => number,
  ) {}

  /** An error at this map. */
  error(message: string, node: unknown = this.node): ProblemFileError {
    const range = (node as { range?: readonly number[] | null }).range;
    const line = range?.[0] === undefined ? '' : `Line ${String(this.lineOf(range[0]))}: `;
    return new ProblemFileError(`${line}${message}`);
  }

  has(key: string): boolean {
    return this.node.has(key);
  }

  private get(key: string): unknown {
    this.asked.add(key);
    return this.node.get(key, true);
  }

  /** A text as it stands in the file: `4.0` stays `4.0`. Empty where the key is absent. */
  text(key: string): string {
    const node = this.get(key);
    if (node === undefined) return '';
    if (!isScalar(node)) throw this.error(`“${key}” is one value.`, node);
    return textOf(node);
  }

  /** Words, listed with commas or as a YAML list; joined as the composer's fields have them. */
  words(key: string, separator = ', '): string {
    const node = this.get(key);
    if (!isSeq(node)) return node === undefined ? '' : this.text(key);
    return node.items
      .map((item) => {
        if (!isScalar(item)) throw this.error(`“${key}” lists single values.`, item);
        return textOf(item);
      })
      .join(separator);
  }

  flag(key: string): boolean {
    const text = this.text(key);
    if (text === '' || text === 'false' || text === 'no') return false;
    if (text === 'true' || text === 'yes') return true;
    throw this.error(`“${key}” is yes or no.`, this.get(key));
  }

  choice<Value extends string>(key: string, allowed: readonly Value[], otherwise: Value): Value {
    const text = this.text(key);
    if (text === '') return otherwise;
    const found = allowed.find((value) => value === text);
    if (found === undefined)
      throw this.error(`“${key}” is one of ${allowed.join(', ')}; here it is “${text}”.`, this.get(key));
    return found;
  }

  several<Value extends string>(key: string, allowed: readonly Value[]): Value[] {
    return this.words(key)
      .split(',')
      .map((word) => word.trim())
      .filter((word) => word !== '')
      .map((word) => {
        const found = allowed.find((value) => value === word);
        if (found === undefined)
          throw this.error(`“${key}” lists ${allowed.join(', ')}; “${word}” is none of them.`, this.get(key));
        return found;
      });
  }

  /** A map below a key. */
  map(key: string): FileFields | undefined {
    const node = this.get(key);
    if (node === undefined || (isScalar(node) && node.value === null)) return undefined;
    if (!isMap(node)) throw this.error(`“${key}” holds keys of its own.`, node);
    return new FileFields(node, `“${key}”`, this.lineOf);
  }

  /** The maps below a key, by their names, in order. */
  entries(key: string): readonly (readonly [string, FileFields])[] {
    const map = this.map(key);
    if (!map) return [];
    return map.node.items.map((pair) => {
      const name = isScalar(pair.key) ? String(pair.key.value) : '';
      if (!isMap(pair.value)) throw this.error(`“${name}” in “${key}” holds keys of its own.`, pair.key);
      return [name, new FileFields(pair.value, `“${name}”`, this.lineOf)] as const;
    });
  }

  /** The maps of a list below a key. */
  items(key: string): readonly FileFields[] {
    const node = this.get(key);
    if (node === undefined || (isScalar(node) && node.value === null)) return [];
    if (!isSeq(node)) throw this.error(`“${key}” is a list, each entry with “- ” before it.`, node);
    return node.items.map((item, index) => {
      if (!isMap(item)) throw this.error(`Entry ${String(index + 1)} of “${key}” holds keys of its own.`, item);
      return new FileFields(item, `entry ${String(index + 1)} of “${key}”`, this.lineOf);
    });
  }

  /** Refuses keys that nobody asked for. */
  end(): void {
    for (const pair of this.node.items) {
      const key = isScalar(pair.key) ? String(pair.key.value) : '';
      if (!this.asked.has(key)) throw this.error(`There is no “${key}” in ${this.what}.`, pair.key);
    }
  }
}
