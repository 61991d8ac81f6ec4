import { execFileSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { breaches, importsOf } from './house-rules.ts';

const root = fileURLToPath(new URL('..', import.meta.url));

/** Files that are committed or could be: what git does not ignore. */
const files = execFileSync('git', ['ls-files', '--cached', '--others', '--exclude-standard'], {
  cwd: root,
  encoding: 'utf8',
})
  .split('\n')
  .filter((file) => file !== '' && existsSync(root + file));
const text = (file: string) => readFileSync(root + file, 'utf8');
const code = files.filter((file) => /^(src|test|samples)\/.*\.(ts|mjs|js)$/.test(file));

/** Not written by hand: the lock file, and what the program makes. */
const made = /^(package-lock\.json|reports\/|.*\.(csv|png))/;

describe('the house', () => {
  it('keeps its import rules', () => {
    const source = code.filter((file) => file.startsWith('src/'));
    expect(source.length).toBeGreaterThan(20);
    expect(breaches(new Map(source.map((file) => [file, importsOf(file, text(file))])))).toEqual([]);
  });

  it('has no file over 350 lines', () => {
    expect(code.filter((file) => text(file).split('\n').length > 351)).toEqual([]);
  });

  it('has nothing at its top but what belongs there', () => {
    const top = new Set(files.map((file) => file.split('/')[0]));
    const belongs = [
      'package.json',
      'tsconfig.json',
      'README.md',
      'DEVELOPERS.md',
      'src',
      'test',
      'samples',
      'reports',
    ];
    const forced = ['package-lock.json', 'LICENSE'];
    expect([...top].filter((name) => !name.startsWith('.') && ![...belongs, ...forced].includes(name))).toEqual([]);
  });

  it('uses none of the words that stay out, named here in pieces', () => {
    const words = new RegExp(
      `\\b(${['lec-ture', 'trans-cript', 'ta-lk', 'cour-se'].join('|').replaceAll('-', '')})s?\\b`,
      'i',
    );
    const written = files.filter((file) => !made.test(file));
    expect(written.filter((file) => words.test(file) || words.test(text(file)))).toEqual([]);
  });

  it('names no registry host, named here in pieces', () => {
    const hosts = /npm[j]s\.(org|com)|yarn[p]kg\.com|[p]ypi\.org|deb\.deb[i]an|proxy\.gol[a]ng|cra[t]es\.io/i;
    expect(files.filter((file) => hosts.test(text(file)))).toEqual([]);
  });
});

describe('the rules find what is planted', () => {
  const planted: [title: string, from: string, to: string, says: string][] = [
    ['core importing report', 'src/core/study.ts', 'src/report/html.ts', 'must not import'],
    ['core importing Node', 'src/core/study.ts', 'node:fs', 'must not import'],
    ['core importing Node without its prefix', 'src/core/study.ts', 'fs', 'must not import'],
    ['report importing cli', 'src/report/html.ts', 'src/cli/ink.ts', 'must not import'],
    ['cli importing desk', 'src/cli/main.ts', 'src/desk/page.ts', 'must not import'],
    ['desk importing cli', 'src/desk/page.ts', 'src/cli/main.ts', 'must not import'],
    ['recording importing spectrum', 'src/core/recording/open.ts', 'src/core/spectrum/welch.ts', 'must not import'],
    ['filter importing advice', 'src/core/filter/run.ts', 'src/core/advice/advise.ts', 'must not import'],
    ['spectrum importing the study above it', 'src/core/spectrum/welch.ts', 'src/core/study.ts', 'must not import'],
    ['the foundation importing a part', 'src/core/figure.ts', 'src/core/filter/run.ts', 'must not import'],
    ['a part nobody knows importing another', 'src/core/new/a.ts', 'src/core/filter/run.ts', 'must not import'],
    ['a circle', 'src/core/filter/run.ts', 'src/core/filter/run.ts', 'circle'],
    ['a file named utils', 'src/core/filter/utils.ts', 'fft.js', 'says nothing'],
    ['a barrel', 'src/report/index.ts', 'fft.js', 'says nothing'],
  ];
  it.each(planted)('%s', (_title, from, to, says) => {
    expect(breaches(new Map([[from, [to]]]))).toEqual([expect.stringContaining(says)]);
  });

  it('a circle of three', () => {
    const [a, b, c] = ['a', 'b', 'c'].map((name) => `src/core/filter/${name}.ts`);
    expect(
      breaches(
        new Map([
          [a, [b]],
          [b, [c]],
          [c, [a]],
        ]),
      ),
    ).toEqual([`circle: ${a} -> ${b} -> ${c} -> ${a}`]);
  });

  it('no breach where there is none', () => {
    const allowed = new Map([
      ['src/cli/main.ts', ['node:fs', 'commander', 'src/core/study.ts', 'src/report/html.ts']],
      ['src/report/html.ts', ['src/core/study.ts']],
      ['src/core/study.ts', ['src/core/advice/advise.ts', 'src/core/user-error.ts']],
      ['src/core/advice/advise.ts', ['src/core/filter/run.ts', 'src/core/figure.ts']],
    ]);
    expect(breaches(allowed)).toEqual([]);
  });

  it('every way to name a module is read, and none from comments or strings', () => {
    const source = `
      import type { A } from './a.ts';
      import '../b.ts';
      export { c } from './c.ts';
      export * from './d.ts';
      const e = await import('./e.ts');
      type F = import('./f.ts').F;
      // import './no.ts';
      const text = "import './no.ts'";
    `;
    expect(importsOf('src/core/filter/x.ts', source)).toEqual([
      'src/core/filter/a.ts',
      'src/core/b.ts',
      'src/core/filter/c.ts',
      'src/core/filter/d.ts',
      'src/core/filter/e.ts',
      'src/core/filter/f.ts',
    ]);
  });
});
