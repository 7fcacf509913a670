import { Parser } from 'htmlparser2';

const SCRIPT_TYPES = new Set(['', 'module', 'text/javascript', 'application/javascript', 'text/ecmascript', 'application/ecmascript', 'text/babel', 'text/jsx']);

/**
 * The page with everything but its scripts replaced by blanks, so that offsets and lines stay those of the page. Scripts
 * share one global scope, as they do in a browser; each is closed by a semicolon where its end tag stood, so that one
 * cannot run on into the next. Scripts with a `src` or of another type (templates, shaders, data) are blanked too.
 */
export function scriptsOnly(text: string): string {
  const pieces: string[] = [];
  let done = 0;
  let open: number | undefined;
  const parser: Parser = new Parser({
    onopentag(name, attributes) {
      const type = (attributes['type'] ?? attributes['lang'] ?? '').trim().toLowerCase().replace(/;.*$/, '');
      if (name === 'script' && attributes['src'] === undefined && SCRIPT_TYPES.has(type)) open = parser.endIndex + 1;
    },
    onclosetag(name) {
      if (name !== 'script' || open === undefined) return;
      const end = Math.max(open, Math.min(parser.startIndex, text.length));
      pieces.push(blank(text.slice(done, open)), withoutPageComments(text.slice(open, end)));
      if (end < text.length) pieces.push(';');
      done = Math.min(end + 1, text.length);
      open = undefined;
    },
  });
  parser.write(text);
  parser.end();
  pieces.push(blank(text.slice(done)));
  return pieces.join('');
}

function blank(text: string): string {
  return text.replace(/[^\r\n]/g, ' ');
}

/** `<!--` and, at a line's start, `-->` begin line comments in old scripts. */
function withoutPageComments(script: string): string {
  return script.replace(/^([ \t]*)<!--/gm, '$1//  ').replace(/^([ \t]*)-->/gm, '$1// ');
}
