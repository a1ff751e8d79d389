import { mkdirSync, mkdtempSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { filesUnder, hashFiles, isOutdated } from './hash-inputs.mjs';

let root: string;

beforeEach(() => {
  root = mkdtempSync(join(tmpdir(), 'halfsilver-hash-'));
  mkdirSync(join(root, 'source', 'deep'), { recursive: true });
  writeFileSync(join(root, 'source', 'a.ts'), 'a');
  writeFileSync(join(root, 'source', 'deep', 'b.ts'), 'b');
  writeFileSync(join(root, 'source', 'a.spec.ts'), 'test');
  writeFileSync(join(root, 'alone.json'), '{}');
});

afterEach(() => {
  rmSync(root, { recursive: true });
});

const files = () => filesUnder(root, ['source', 'alone.json', 'absent'], (path) => !path.endsWith('.spec.ts'));
const hash = () => hashFiles(root, files());

describe('filesUnder', () => {
  it('finds files in folders of folders, once each, in order, and passes over what is absent or does not count', () => {
    expect(files()).toEqual(['alone.json', 'source/a.ts', 'source/deep/b.ts']);
    expect(filesUnder(root, ['source/a.ts', 'source'], (path) => path.endsWith('a.ts'))).toEqual(['source/a.ts']);
  });
});

describe('hashFiles', () => {
  it('stays while nothing that counts changes', () => {
    const before = hash();
    writeFileSync(join(root, 'source', 'a.spec.ts'), 'another test');
    expect(hash()).toBe(before);
  });

  it('changes with a content, a name, a new file, and what else it depends on', () => {
    const before = hash();
    writeFileSync(join(root, 'source', 'a.ts'), 'aa');
    const changed = hash();
    renameSync(join(root, 'source', 'a.ts'), join(root, 'source', 'c.ts'));
    const renamed = hash();
    writeFileSync(join(root, 'source', 'd.ts'), '');
    expect(new Set([before, changed, renamed, hash(), hashFiles(root, files(), 'node 21')]).size).toBe(5);
  });

  it('does not take content that moves between files for the same', () => {
    const before = hash();
    writeFileSync(join(root, 'source', 'a.ts'), 'ab');
    writeFileSync(join(root, 'source', 'deep', 'b.ts'), '');
    expect(hash()).not.toBe(before);
  });
});

describe('isOutdated', () => {
  it('is so without a marker and with another hash, and not with the same', () => {
    const marker = join(root, 'built-from');
    expect(isOutdated(marker, 'abc')).toBe(true);
    writeFileSync(marker, 'abc\n');
    expect(isOutdated(marker, 'abc')).toBe(false);
    expect(isOutdated(marker, 'abd')).toBe(true);
  });
});
