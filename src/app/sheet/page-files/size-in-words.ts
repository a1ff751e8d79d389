/** Bytes in words: `1.4 MB`, `320 kB`. */
export function sizeInWords(bytes: number): string {
  if (bytes < 999_500) return `${String(Math.max(1, Math.round(bytes / 1000)))} kB`;
  return `${(bytes / 1e6).toFixed(bytes < 9.95e6 ? 1 : 0)} MB`;
}
