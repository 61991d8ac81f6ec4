import { isBuiltin } from 'node:module';
import { posix } from 'node:path';
import { parseSync } from 'vite';

/** Source files and what each of them imports, as paths from the top of the project (`src/core/study.ts`) or package names. */
export type ImportGraph = ReadonlyMap<string, readonly string[]>;

/** What each part of src may import of the others; everybody may import itself. */
const PARTS: Readonly<Record<string, readonly string[]>> = {
  core: [],
  report: ['core'],
  cli: ['core', 'report'],
  desk: ['core', 'report'],
  build: [],
};

/** What each part of the core may import of the others: one direction. Files at the core's top stand above all parts ... */
const CORE_PARTS: Readonly<Record<string, readonly string[]>> = {
  recording: [],
  spectrum: ['recording'],
  health: ['recording', 'spectrum'],
  filter: ['recording'],
  advice: ['recording', 'spectrum', 'filter'],
  simulation: ['recording', 'spectrum', 'filter', 'advice', 'study-result.ts'],
  parts: ['filter'],
  firmware: ['filter'],
  proof: ['recording', 'spectrum', 'filter'],
};

/** ... but for these, which stand on nothing and serve all. */
const CORE_FOUNDATION = ['figure.ts', 'user-error.ts'];

/** Parts that run in a browser as well as in Node. */
const EVERYWHERE = ['core', 'report', 'desk'];

const NOTHING_NAMES = /(^|\/)(utils?|helpers?|index)\.[a-z]+$/;

/** Every module that a file names: imports, re-exports, dynamic imports and import types; relative ones as paths from the top. */
export function importsOf(path: string, code: string): string[] {
  const { program, errors } = parseSync(path, code);
  if (errors.length > 0) throw new Error(`${path}: ${errors[0].message}`);
  return namedModules(program).map((name) => (name.startsWith('.') ? posix.join(posix.dirname(path), name) : name));
}

function namedModules(node: unknown): string[] {
  if (Array.isArray(node)) return node.flatMap(namedModules);
  if (node === null || typeof node !== 'object') return [];
  const { type, source } = node as { type?: string; source?: { value?: unknown } };
  const names =
    /^(Import|Export|TSImportType)/.test(type ?? '') && typeof source?.value === 'string' ? [source.value] : [];
  return [...names, ...Object.values(node).flatMap(namedModules)];
}

/** Every breach of the rules of the house, one sentence each. */
export function breaches(graph: ImportGraph): string[] {
  return [...forbiddenImports(graph), ...circles(graph), ...nothingNames(graph)];
}

function forbiddenImports(graph: ImportGraph): string[] {
  return [...graph].flatMap(([from, imports]) =>
    imports.filter((to) => !mayImport(from, to)).map((to) => `${from} must not import ${to}`),
  );
}

function mayImport(from: string, to: string): boolean {
  const [, part, corePart] = from.split('/');
  if (isBuiltin(to)) return !EVERYWHERE.includes(part);
  if (!to.startsWith('src/')) return true;
  const [, toPart, toCorePart] = to.split('/');
  if (part !== toPart) return PARTS[part]?.includes(toPart) ?? false;
  if (part !== 'core' || corePart === toCorePart || CORE_FOUNDATION.includes(toCorePart)) return true;
  if (CORE_FOUNDATION.includes(corePart)) return false;
  const atTop = corePart.endsWith('.ts');
  return atTop || (CORE_PARTS[corePart]?.includes(toCorePart) ?? false);
}

/** Depth first over the graph: an import of a file that is still open closes a circle. */
function circles(graph: ImportGraph): string[] {
  const done = new Set<string>();
  const found: string[] = [];
  const visit = (file: string, open: readonly string[]): void => {
    if (open.includes(file)) found.push(`circle: ${[...open.slice(open.indexOf(file)), file].join(' -> ')}`);
    if (open.includes(file) || done.has(file)) return;
    for (const next of graph.get(file) ?? []) visit(next, [...open, file]);
    done.add(file);
  };
  for (const file of graph.keys()) visit(file, []);
  return found;
}

function nothingNames(graph: ImportGraph): string[] {
  return [...graph.keys()]
    .filter((file) => NOTHING_NAMES.test(file))
    .map((file) => `${file} has a name that says nothing`);
}
