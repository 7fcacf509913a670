import type { PanelClaim, PanelData, PanelEquation, PanelTerm } from '@visviva/shared';
import { button, element, formula, number } from './elements';

const marks = { holds: '✓', differs: '≠', unread: '?' } as const;
const words = { holds: 'holds', differs: 'differs', unread: 'could not be read' } as const;

/** The claims, each leading to its place in the code. */
export function claimList(data: PanelData, reveal: (line: number, column: number) => void): HTMLElement {
  const item = (c: PanelClaim): HTMLElement => {
    const go = button('', () => reveal(c.range.start.line, c.range.start.column), { class: 'claim', title: 'Go to the place in the code' });
    go.append(
      element('span', { class: `mark ${c.verdict}`, 'aria-hidden': 'true' }, marks[c.verdict]),
      element('span', { class: 'what' }, element('code', {}, `${c.output} = ${c.quantity}`), element('span', { class: 'verdict' }, ` ${words[c.verdict]}`)),
      element('span', { class: 'why' }, c.message),
    );
    return element('li', {}, go);
  };
  return element('ul', { class: 'claims', 'aria-label': 'Claims' }, ...data.claims.map(item));
}

/** The equations with the terms that differ marked, each above the table of its terms. */
export function equationList(data: PanelData): HTMLElement {
  const parts = data.equations.flatMap((e) => [element('h3', {}, `Along ${e.coordinate}`), equation(e), table(e)]);
  return element('div', { class: 'equations' }, ...parts);
}

function equation(e: PanelEquation): HTMLElement {
  const line = element('p', { class: 'equation' });
  e.terms.forEach((t, i) => {
    const sign = t.sign === '-' ? '−' : i > 0 ? '+' : '';
    const term = element('span', { class: `term ${t.state}` }, sign === '' ? undefined : element('span', { class: 'sign' }, sign), formula(t.formula));
    if (t.state === 'differs') term.append(element('span', { class: 'note' }, short(t)));
    line.append(term);
  });
  if (e.terms.length > 0) line.append(element('span', { class: 'term' }, element('span', { class: 'sign' }, '='), '0'));
  if (!e.note) return line;
  return element('div', {}, line, element('p', { class: 'hint' }, e.note));
}

function short(t: PanelTerm): string {
  return t.factor === 0 ? 'missing in the code' : t.factor === -1 ? 'wrong sign in the code' : `${number(t.factor!).replace('-', '−')} × in the code`;
}

function table(e: PanelEquation): HTMLElement {
  if (e.terms.every((t) => t.state === 'unknown')) return element('span');
  const rows = e.terms.map((t) =>
    element(
      'tr',
      { class: t.state },
      element('th', { scope: 'row' }, formula(t.formula)),
      element('td', {}, signed(t, 1)),
      element('td', {}, t.factor === undefined ? '–' : signed(t, t.factor)),
      element('td', {}, t.state === 'same' ? 'agrees' : t.state === 'unknown' ? 'not told apart' : short(t)),
    ),
  );
  const head = element('tr', {}, ...['Term', 'Expected', 'Found', ''].map((h) => (h === '' ? element('td') : element('th', { scope: 'col' }, h))));
  const wrong = e.terms.some((t) => t.state === 'differs');
  const details = element('details', {}, element('summary', {}, `Terms along ${e.coordinate}, expected and found`), element('table', {}, element('thead', {}, head), element('tbody', {}, ...rows)));
  details.open = wrong;
  return details;
}

function signed(t: PanelTerm, factor: number): string {
  const x = t.sign === '-' ? -factor : factor;
  return x === 0 ? '0' : `${x < 0 ? '−' : '+'}${number(Math.abs(x))}`;
}

export function conservedList(data: PanelData): HTMLElement | undefined {
  if (data.conserved.length === 0) return undefined;
  const items = data.conserved.map((c) => element('li', {}, element('code', {}, c.formula.text.split(' = ')[0]!), ' = ', formula(c.formula), element('span', { class: 'why' }, c.why)));
  return element('section', { 'aria-labelledby': 'conserved' }, element('h2', { id: 'conserved' }, 'Constant along the motion'), element('ul', { class: 'plain' }, ...items));
}
