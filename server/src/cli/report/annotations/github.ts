import { listFindings } from '../findings';
import { fromRoot, type Page } from '../page';

/**
 * Source: GitHub Docs, "Workflow commands for GitHub Actions", sections on error, warning and notice messages. Percent
 * signs and line ends are escaped, in properties colons and commas too.
 */
export function githubAnnotations(page: Page): string {
  return listFindings(page.report)
    .filter((f) => !f.accepted)
    .map((f) => {
      const command = f.level === 'note' ? 'notice' : f.level;
      const { start, end } = f.range;
      const columns = start.line === end.line ? { col: start.column, endColumn: Math.max(start.column, end.column - 1) } : { col: start.column };
      const properties = { file: fromRoot(page, f.file), line: start.line, endLine: end.line, ...columns, title: `Visviva: ${f.code}` };
      const list = Object.entries(properties).map(([name, value]) => `${name}=${property(String(value))}`);
      return `::${command} ${list.join(',')}::${data(f.message)}\n`;
    })
    .join('');
}

function data(text: string): string {
  return text.replaceAll('%', '%25').replaceAll('\r', '%0D').replaceAll('\n', '%0A');
}

function property(text: string): string {
  return data(text).replaceAll(':', '%3A').replaceAll(',', '%2C');
}
