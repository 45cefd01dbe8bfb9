/**
 * A result as JSON text: indented, lists of plain values on one line, keys in their given order, numbers with all
 * their digits, a newline at the end. A figure that is not a finite number (of a slice that did not converge) is null.
 */
export function resultJson(result: object): string {
  return `${write(result, '')}\n`;
}

function write(value: unknown, indent: string): string {
  if (typeof value !== 'object' || value === null) return JSON.stringify(value);
  const deeper = `${indent}  `;
  if (Array.isArray(value)) {
    const items = value.map((item) => write(item, deeper));
    if (!value.some((item) => typeof item === 'object' || typeof item === 'string')) return `[${items.join(', ')}]`;
    return items.length === 0 ? '[]' : `[\n${items.map((item) => deeper + item).join(',\n')}\n${indent}]`;
  }
  const entries = Object.entries(value).filter(([, item]) => item !== undefined);
  const lines = entries.map(([key, item]) => `${deeper}${JSON.stringify(key)}: ${write(item, deeper)}`);
  return lines.length === 0 ? '{}' : `{\n${lines.join(',\n')}\n${indent}}`;
}
