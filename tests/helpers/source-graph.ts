import { execFileSync } from 'node:child_process';
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';

/** What one source file asks of others. */
export interface SourceFile {
  /** From the package's `src`, with slashes: 'mesh/refine.ts'. */
  readonly path: string;
  /** Module names as written, imports of types and at run time included. */
  readonly imports: readonly string[];
  /** Names the file uses without declaring or importing them: language and platform globals. */
  readonly globals: readonly string[];
}

export interface SourcePackage {
  readonly name: string;
  /** What others may import: the names under `exports` in its package.json, '@gapwright/fem-core/mesh'. */
  readonly publicNames: readonly string[];
  /** Keys of `dependencies` in its package.json. */
  readonly dependencies: readonly string[];
  readonly files: readonly SourceFile[];
}

const root = fileURLToPath(new URL('../..', import.meta.url));

export function readPackage(folder: string): SourcePackage {
  const home = join(root, 'packages', folder);
  const {
    name,
    exports,
    dependencies = {},
  } = JSON.parse(readFileSync(join(home, 'package.json'), 'utf8')) as {
    name: string;
    exports: Record<string, unknown>;
    dependencies?: Record<string, string>;
  };
  const source = join(home, 'src');
  const files = readdirSync(source, { recursive: true, encoding: 'utf8' })
    .filter((path) => path.endsWith('.ts'))
    .map((path) => readSource(path.split(sep).join('/'), readFileSync(join(source, path), 'utf8')));
  const publicNames = Object.keys(exports).map((entry) => name + entry.slice(1)); // '.' and './mesh'
  return { name, publicNames, dependencies: Object.keys(dependencies), files };
}

/** First path segments of all files that are tracked or could be: what .gitignore names is left out. */
export function topLevelEntries(): readonly string[] {
  const options = { cwd: root, encoding: 'utf8' } as const;
  const listed = execFileSync('git', ['ls-files', '-z', '--cached', '--others', '--exclude-standard'], options);
  return [...new Set(listed.split('\0').filter((path) => path !== ''))].map((path) => path.split('/')[0]);
}

/** Imports and globals of one file by its syntax tree. */
export function readSource(path: string, text: string): SourceFile {
  const tree = ts.createSourceFile(path, text, ts.ScriptTarget.ES2022, true);
  const imports: string[] = [];
  const used = new Set<string>();
  const declared = new Set<string>();
  const visit = (node: ts.Node): void => {
    const module = moduleNamed(node);
    if (module !== undefined) imports.push(module);
    if (ts.isIdentifier(node)) {
      if (declares(node)) declared.add(node.text);
      else if (stands(node)) used.add(node.text);
    }
    ts.forEachChild(node, visit);
  };
  visit(tree);
  return { path, imports, globals: [...used].filter((name) => !declared.has(name)) };
}

/** The module of `import ... from`, `export ... from`, `import('...')` in code and in types. */
function moduleNamed(node: ts.Node): string | undefined {
  let name: ts.Node | undefined;
  if (ts.isImportDeclaration(node) || ts.isExportDeclaration(node)) name = node.moduleSpecifier;
  else if (ts.isImportTypeNode(node) && ts.isLiteralTypeNode(node.argument)) name = node.argument.literal;
  else if (ts.isCallExpression(node) && node.expression.kind === ts.SyntaxKind.ImportKeyword) name = node.arguments[0];
  return name !== undefined && ts.isStringLiteralLike(name) ? name.text : undefined;
}

function declares(name: ts.Identifier): boolean {
  const { parent } = name;
  return (
    (ts.isVariableDeclaration(parent) ||
      ts.isParameter(parent) ||
      ts.isBindingElement(parent) ||
      ts.isFunctionDeclaration(parent) ||
      ts.isImportSpecifier(parent) ||
      ts.isImportClause(parent)) &&
    parent.name === name
  );
}

/** Whether the identifier stands for a value of its own, not for a property of another or a key. */
function stands(name: ts.Identifier): boolean {
  const { parent } = name;
  if (ts.isPropertyAccessExpression(parent)) return parent.expression === name;
  if (ts.isQualifiedName(parent)) return parent.left === name;
  if (ts.isBindingElement(parent)) return parent.propertyName !== name;
  return !(
    (ts.isPropertyAssignment(parent) ||
      ts.isPropertySignature(parent) ||
      ts.isMethodDeclaration(parent) ||
      ts.isMethodSignature(parent) ||
      ts.isPropertyDeclaration(parent) ||
      ts.isNamedTupleMember(parent)) &&
    parent.name === name
  );
}

/** The file a relative import means, from the package's `src`; '../...' where it leaves it. */
export function targetOf(file: SourceFile, module: string): string {
  const to = join(dirname(file.path), module).split(sep).join('/');
  return relative('.', to).split(sep).join('/').replace(/\.js$/, '.ts');
}

export const isRelative = (module: string): boolean => module.startsWith('.');
