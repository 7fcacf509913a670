/** Markdown as it reads without a renderer: for editors that show hovers as plain text. What is code stays as it is. */
export function plainText(markdown: string): string {
  return markdown
    .split(/(^```[^\n]*\n[\s\S]*?^```\s*$\n?|`[^`\n]*`)/m)
    .map((piece, index) => (index % 2 === 1 ? unfenced(piece) : unmarked(piece)))
    .join('')
    .trim();
}

function unfenced(code: string): string {
  return code.startsWith('```') ? code.replace(/^```.*$\n?/gm, '') : code.slice(1, -1);
}

function unmarked(prose: string): string {
  return prose
    .replace(/^#+\s*/gm, '')
    .replace(/^\|?[\s:|-]+\|[\s:|-]*$\n?/gm, '')
    .replace(/\*\*(\S(?:[^*\n]*\S)?)\*\*/g, '$1')
    .replace(/\\([\\`*_{}[\]()#+.!|-])/g, '$1');
}
