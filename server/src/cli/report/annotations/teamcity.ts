import { codeDoc } from '../../../diagnosis/codes';
import { listFindings } from '../findings';
import { fromRoot, type Page } from '../page';

/**
 * Source: TeamCity documentation, "Service Messages", sections "Escaped Values" and "Reporting Inspections". A kind of
 * inspection is told once, before its first instance.
 */
export function teamcityAnnotations(page: Page): string {
  const found = listFindings(page.report).filter((f) => !f.accepted);
  const kinds = [...new Set(found.map((f) => f.code))].map((code) => {
    const doc = codeDoc(code);
    return message('inspectionType', { id: code, name: doc.title, description: doc.meaning, category: 'Visviva' });
  });
  const instances = found.map((f) =>
    message('inspection', {
      typeId: f.code,
      message: f.message,
      file: fromRoot(page, f.file),
      line: String(f.range.start.line),
      SEVERITY: f.level === 'error' ? 'ERROR' : f.level === 'warning' ? 'WARNING' : 'INFO',
    }),
  );
  return [...kinds, ...instances].join('');
}

function message(name: string, attributes: Readonly<Record<string, string>>): string {
  const list = Object.entries(attributes).map(([key, value]) => `${key}='${escaped(value)}'`);
  return `##teamcity[${name} ${list.join(' ')}]\n`;
}

function escaped(text: string): string {
  return text
    .replace(/[|'[\]]/g, '|$&')
    .replaceAll('\n', '|n')
    .replaceAll('\r', '|r')
    .replace(/[\u0080-\uffff]/g, (c) => `|0x${c.charCodeAt(0).toString(16).padStart(4, '0')}`);
}
