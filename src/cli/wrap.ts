const WIDTH = 100;

/** Breaks a text at blanks to the width of a terminal, each line indented. */
export function wrap(text: string, indent = '  '): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + 1 + word.length > WIDTH - indent.length) {
      lines.push(`${indent}${line}`);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, `${indent}${line}`];
}
