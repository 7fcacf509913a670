import { absolute } from '../../../host/paths';
import { listFindings } from '../findings';
import type { Page } from '../page';

/**
 * Source: Microsoft Learn, Azure Pipelines, "Logging commands", sections "LogIssue: Log an error or warning" and
 * "Logging command format": paths are absolute. There is no third level: a note becomes a
 * warning.
 */
export function azureAnnotations(page: Page): string {
  return listFindings(page.report)
    .filter((f) => !f.accepted)
    .map((f) => {
      const properties = {
        type: f.level === 'error' ? 'error' : 'warning',
        sourcepath: absolute(f.file, page.folder),
        linenumber: f.range.start.line,
        columnnumber: f.range.start.column,
        code: f.code,
      };
      const list = Object.entries(properties).map(([name, value]) => `${name}=${escaped(String(value))};`);
      return `##vso[task.logissue ${list.join('')}]${escaped(f.message)}\n`;
    })
    .join('');
}

function escaped(text: string): string {
  return text
    .replaceAll('%', '%AZP25')
    .replaceAll('\r', '%0D')
    .replaceAll('\n', '%0A')
    .replaceAll(']', '%5D')
    .replaceAll(';', '%3B');
}
