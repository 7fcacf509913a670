import type { Span } from '../../text/span';

export function textBetween(text: string, span: Span): string {
  return text.slice(span.start, span.end);
}
