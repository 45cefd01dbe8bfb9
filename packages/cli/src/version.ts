import { readFileSync } from 'node:fs';

/** Version of the package, as its package.json says. */
export function ownVersion(): string {
  const manifest: unknown = JSON.parse(readFileSync(new URL('../package.json', import.meta.url), 'utf8'));
  if (typeof manifest === 'object' && manifest !== null && 'version' in manifest) return String(manifest.version);
  throw new Error('package.json has no version');
}
