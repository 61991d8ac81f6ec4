/**
 * Bundles the command line into dist/: plain JavaScript for Node, with only the drawing library and the font left to be
 * installed. Plain Node runs this file, so that `prepare` needs nothing but esbuild.
 */
import { chmod, mkdir, readdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import { dirname, join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('../..', import.meta.url));
const dist = join(root, 'dist');

/** chartjs-node-canvas asks for `canvas` under a name made at run time, which no bundler follows: hand it our stand-in. */
const standInForCanvas = {
  name: 'stand-in-for-canvas',
  setup({ onLoad }) {
    onLoad({ filter: /chartjs-node-canvas[\\/]dist[\\/]freshRequire\.js$/ }, () => ({
      contents: "exports.freshRequire = () => require('canvas');",
    }));
  },
};

const { outputFiles, metafile } = await build({
  absWorkingDir: root,
  entryPoints: { quietcorner: 'src/cli/main.ts' },
  outdir: dist,
  chunkNames: 'parts/[name]-[hash]',
  bundle: true,
  splitting: true,
  format: 'esm',
  platform: 'node',
  target: 'node20',
  external: ['@napi-rs/canvas', '@fontsource/dejavu-sans'],
  // CommonJS packages inside an ES module still use what Node gives to CommonJS only.
  banner: {
    js: "import { createRequire as requireFrom } from 'node:module'; const require = requireFrom(import.meta.url); const __filename = import.meta.url;",
  },
  // One copy of Chart.js for the renderer (CommonJS) and for plugins (ES modules): they must register in the same one.
  alias: {
    'chart.js': './node_modules/chart.js/dist/chart.cjs',
    'chart.js/auto': './node_modules/chart.js/auto/auto.cjs',
    'chart.js/helpers': './node_modules/chart.js/helpers/helpers.cjs',
  },
  plugins: [standInForCanvas],
  metafile: true,
  write: false,
  logLevel: 'warning',
});

const made = new Map(outputFiles.map(({ path, text }) => [path, text]));
const program = join(dist, 'quietcorner.js');
made.set(program, `#!/usr/bin/env node\n${made.get(program)}`);
made.set(join(dist, 'LICENSES.txt'), await licences(Object.keys(metafile.inputs)));

for (const [path, text] of made) await replace(path, text);
await chmod(program, 0o755);
for (const name of await readdir(dist, { recursive: true })) {
  const path = join(dist, name);
  if (/\.(js|txt)$/.test(name) && !made.has(path)) await rm(path);
}
process.stderr.write(`built ${relative(root, program)}: ${made.size} files\n`);

/** Writes beside the target and renames, and only what differs: a program that runs from dist never meets half a file. */
async function replace(path, text) {
  const present = await readFile(path, 'utf8').catch(() => null);
  if (present === text) return;
  await mkdir(dirname(path), { recursive: true });
  const part = `${path}.${process.pid}.part`;
  await writeFile(part, text);
  await rename(part, path);
}

/** Licence texts of the packages that the bundle carries inside it, each text once. */
async function licences(inputs) {
  const folders = new Set(inputs.map((path) => path.match(/^.*node_modules\/(?:@[^/]+\/)?[^/]+/)?.[0]).filter(Boolean));
  const carriers = new Map();
  for (const folder of [...folders].sort()) {
    const { name, version, license } = JSON.parse(await readFile(join(root, folder, 'package.json'), 'utf8'));
    const file = (await readdir(join(root, folder))).find((entry) => /^licen[cs]e/i.test(entry));
    const text = file ? (await readFile(join(root, folder, file), 'utf8')).trim() : `Licence: ${license}`;
    carriers.set(text, [...(carriers.get(text) ?? []), `${name} ${version}`]);
  }
  const parts = [...carriers].map(([text, names]) => `${names.join('\n')}\n\n${text}\n`);
  return `dist/ carries these packages inside it.\n\n${parts.join(`\n${'-'.repeat(80)}\n\n`)}`;
}
