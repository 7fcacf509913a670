import type { FromPage, PanelData, ToPage } from '@visviva/shared';
import 'uplot/dist/uPlot.min.css';
import './panel.css';
import { drawing, frameOf } from './drawing';
import { button, element } from './elements';
import { claimList, conservedList, equationList } from './equations';
import { integrate, type Track } from './motion';
import { plots, type Plot } from './plots';
import { asPng, base64, stacked, standalone } from './save';
import { State } from './state';
import { Evaluator } from './tape';

declare function acquireVsCodeApi(): { postMessage(message: FromPage): void };

const host = acquireVsCodeApi();
const root = document.getElementById('panel')!;
const state = new State(() => later(refresh));
const durations = [1, 2, 5, 10, 20, 60];
let data: PanelData | undefined;
let duration = 5;
let coordinate = 0;
let moment = 0;
let playing: number | undefined;
let tracks: { derived: Track; code: Track | undefined } | undefined;
let shownPlots: Plot[] = [];
let parts: { picture: HTMLElement; plots: HTMLElement; clock: HTMLInputElement; clockText: HTMLOutputElement } | undefined;

window.addEventListener('message', ({ data: message }: MessageEvent<ToPage>) => {
  if (message.kind === 'empty') showEmpty(message);
  else show(message.data);
});
window.addEventListener('resize', () => later(drawPlots));
// A new theme changes the classes of the page.
new MutationObserver(() => later(drawPlots)).observe(document.body, { attributes: true, attributeFilter: ['class'] });
host.postMessage({ kind: 'ready' });

function showEmpty({ title, hint, action }: ToPage & { kind: 'empty' }): void {
  stop();
  data = undefined;
  const go = action && button(action.label, () => host.postMessage({ kind: 'command', command: action.command }), { class: 'primary' });
  root.replaceChildren(element('div', { class: 'empty' }, element('h1', {}, title), element('p', {}, hint), go));
}

function show(next: PanelData): void {
  const same = data?.uri === next.uri && data.system === next.system && data.function === next.function;
  const focus = same ? document.activeElement?.id : undefined;
  const scroll = document.documentElement.scrollTop;
  if (!same) {
    stop();
    moment = 0;
    coordinate = 0;
  }
  data = next;
  state.take(next);
  const title = element('h1', {}, next.system, next.function === '' ? undefined : element('span', { class: 'function' }, next.function));
  const head = element('header', {}, title, element('p', { class: 'summary', role: 'status' }, summary(next)), claimList(next, reveal));
  const sections: (HTMLElement | undefined)[] = [head];
  if (next.blocked !== undefined) sections.push(element('p', { class: 'hint' }, `Nothing can be derived yet: ${next.blocked}`));
  else {
    sections.push(section('Equations of motion', 'equations', equationList(next)), conservedList(next), stage(next));
    if (next.conventions.length > 0) sections.push(element('p', { class: 'hint' }, `Convention: ${next.conventions.join('; ')}`));
  }
  root.replaceChildren(...sections.filter((s) => s !== undefined));
  if (same) document.documentElement.scrollTop = scroll;
  if (focus) document.getElementById(focus)?.focus();
  if (next.blocked === undefined) refresh();
}

function summary({ claims }: PanelData): string {
  const count = (verdict: string): number => claims.filter((c) => c.verdict === verdict).length;
  const [differs, unread] = [count('differs'), count('unread')];
  if (claims.length === 0) return 'Nothing is claimed about the code yet: add a line such as “checks return = x\'\'”.';
  if (differs === 0 && unread === 0) return claims.length === 1 ? 'The claim holds.' : `All ${claims.length} claims hold.`;
  const rest = [differs > 0 ? `${differs} ${differs === 1 ? 'differs' : 'differ'}` : '', unread > 0 ? `${unread} could not be read` : ''].filter((r) => r !== '');
  return `${claims.length - differs - unread} of ${claims.length} claims hold, ${rest.join(', ')}.`;
}

function section(name: string, id: string, ...children: (HTMLElement | undefined)[]): HTMLElement {
  return element('section', { 'aria-labelledby': id }, element('h2', { id }, name), ...children);
}

/** Drawing, sliders and plots. */
function stage(next: PanelData): HTMLElement {
  const picture = element('div', { class: 'picture' });
  const holder = element('div', { class: 'plots' });
  const clock = element('input', { type: 'range', id: 'clock', min: '0', max: '1', step: '0.0025', 'aria-label': 'Time' });
  clock.value = String(moment);
  const clockText = element('output', { for: 'clock' });
  clock.addEventListener('input', () => {
    stop();
    moment = Number(clock.value);
    drawPicture();
  });
  parts = { picture, plots: holder, clock, clockText };
  const play = button('Play', () => toggle(play), { id: 'play' });
  const length = element('select', { id: 'duration', 'aria-label': 'Length of the motion' }, ...durations.map((d) => element('option', { value: String(d), ...(d === duration ? { selected: '' } : {}) }, `${d} s`)));
  length.addEventListener('change', () => {
    duration = Number(length.value);
    refresh();
  });
  const names = next.motion?.coordinates ?? [];
  const which = element('select', { id: 'coordinate', 'aria-label': 'Coordinate to plot' }, ...names.map((n, i) => element('option', { value: String(i), ...(i === coordinate ? { selected: '' } : {}) }, n)));
  which.addEventListener('change', () => {
    coordinate = Number(which.value);
    drawPlots();
  });
  const isDrawable = next.drawing.points.length + next.drawing.springs.length > 0;
  const save = element(
    'p',
    { class: 'actions' },
    ...(isDrawable ? [button('Save drawing as SVG', () => void saveDrawing('svg')), button('Save drawing as PNG', () => void saveDrawing('png'))] : []),
    ...(next.motion ? [button('Save plots as PNG', savePlots)] : []),
  );
  const witness = next.claims.some((c) => c.verdict === 'differs');
  return element(
    'div',
    { class: 'stage' },
    section(
      'State and motion',
      'stage',
      element('p', { class: 'hint' }, witness ? 'The start is a state at which code and declaration differ. Move it as you like.' : 'Move the start and the parameters as you like.'),
      isDrawable ? picture : element('p', { class: 'hint' }, 'Nothing to draw: the declaration has no points, bodies or positions. Write “point load: mass m at (x, y)”, or “where P = (x, y)”.'),
      next.motion ? element('div', { class: 'clock' }, play, clock, clockText, length) : undefined,
      state.sliders(),
      element('p', { class: 'actions' }, button('Back to the start state', () => { state.reset(); show(next); }, { id: 'reset' })),
    ),
    section('Code against derived', 'plots', next.motion ? element('p', { class: 'choose' }, 'Plot of ', which) : element('p', { class: 'hint' }, 'There is no motion to follow here: the code is an expansion about a point.'), holder, save),
  );
}

function refresh(): void {
  if (!data) return;
  const { motion } = data;
  tracks = motion && {
    derived: integrate(data, motion, motion.derived, state.values, duration),
    code: motion.code ? integrate(data, motion, motion.code, state.values, duration) : undefined,
  };
  drawPicture();
  drawPlots();
}

function stateAt(track: Track | undefined): Float64Array {
  const values = [...state.values];
  if (track && track.times.length > 0) {
    const at = Math.min(track.times.length - 1, Math.round(moment * (Math.max(tracks!.derived.times.length, tracks!.code?.times.length ?? 0) - 1)));
    const n = track.positions.length;
    for (let i = 0; i < n; i++) {
      values[i] = track.positions[i]![at]!;
      values[n + i] = track.velocities[i]![at]!;
    }
  }
  return Float64Array.from(new Evaluator(data!.tape).run(values));
}

function drawPicture(): void {
  if (!data || !parts) return;
  const now = stateAt(tracks?.code ?? tracks?.derived);
  const ghost = tracks?.code ? stateAt(tracks.derived) : undefined;
  const kept = moment;
  const seen: Float64Array[] = [now];
  for (let k = 0; k <= 24; k++) {
    moment = k / 24;
    for (const t of [tracks?.derived, tracks?.code]) if (t) seen.push(stateAt(t));
  }
  moment = kept;
  parts.picture.replaceChildren(drawing(data, now, ghost, frameOf(data, seen)));
  if (ghost) parts.picture.append(element('p', { class: 'key' }, element('span', { class: 'swatch now' }), 'as the code moves it ', element('span', { class: 'swatch ghost' }), 'as derived'));
  parts.clockText.value = `${(moment * duration).toFixed(2)} s`;
  parts.clock.setAttribute('aria-valuetext', parts.clockText.value);
}

function drawPlots(): void {
  if (!data?.motion || !tracks || !parts) return;
  shownPlots.forEach((p) => p.plot.destroy());
  const width = Math.max(240, Math.min(620, parts.plots.clientWidth || root.clientWidth));
  shownPlots = plots(data, coordinate, tracks.derived, tracks.code, width);
  parts.plots.replaceChildren(...shownPlots.map((p) => p.holder));
}

function toggle(control: HTMLButtonElement): void {
  if (playing !== undefined) {
    stop();
    return;
  }
  control.textContent = 'Pause';
  if (moment >= 1) moment = 0;
  let last = performance.now();
  const frame = (time: number): void => {
    moment = Math.min(1, moment + (time - last) / 1000 / duration);
    last = time;
    if (parts) parts.clock.value = String(moment);
    drawPicture();
    if (moment >= 1) stop();
    else playing = requestAnimationFrame(frame);
  };
  playing = requestAnimationFrame(frame);
}

function stop(): void {
  if (playing !== undefined) cancelAnimationFrame(playing);
  playing = undefined;
  const control = document.getElementById('play');
  if (control) control.textContent = 'Play';
}

function reveal(line: number, column: number): void {
  if (data) host.postMessage({ kind: 'reveal', uri: data.uri, line, column });
}

async function saveDrawing(type: 'svg' | 'png'): Promise<void> {
  const svg = parts?.picture.querySelector('svg');
  if (!svg || !data) return;
  const text = standalone(svg);
  const content = type === 'svg' ? base64(text) : await asPng(text, svg.width.baseVal.value, svg.height.baseVal.value);
  host.postMessage({ kind: 'save', name: data.system, type, base64: content });
}

function savePlots(): void {
  if (data && shownPlots.length > 0) host.postMessage({ kind: 'save', name: `${data.system}-motion`, type: 'png', base64: stacked(shownPlots.map((p) => p.plot.ctx.canvas)) });
}

const waiting = new Set<() => void>();

/** Once before the next picture on the screen, however often it is asked for. */
function later(what: () => void): void {
  if (waiting.has(what)) return;
  waiting.add(what);
  requestAnimationFrame(() => {
    waiting.delete(what);
    what();
  });
}
