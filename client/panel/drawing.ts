import type { PanelData, PanelPlace } from '@visviva/shared';
import { shape } from './elements';

const width = 420;
const height = 300;
const margin = 34;

interface Frame {
  readonly scale: number;
  readonly middle: readonly [number, number];
}

type Point = readonly [number, number];

/** A system at one state, drawn from its geometry. `ghost` is where the derived motion has it by now. */
export function drawing(data: PanelData, values: Float64Array, ghost: Float64Array | undefined, frame: Frame): SVGElement {
  const { points, springs, gravity } = data.drawing;
  const screen = ([x, y]: Point): Point => [width / 2 + (x - frame.middle[0]) * frame.scale, height / 2 - (y - frame.middle[1]) * frame.scale];
  const svg = shape('svg', { viewBox: `0 0 ${width} ${height}`, width, height, xmlns: 'http://www.w3.org/2000/svg', role: 'img', 'aria-label': describe(data, values) });
  const at = (place: PanelPlace, v: Float64Array): Point => screen(plane(place, v));
  const [ox, oy] = screen([0, 0]);
  svg.append(shape('path', { class: 'origin', d: `M${ox - 7} ${oy}H${ox + 7}M${ox} ${oy - 7}V${oy + 7}` }));
  if (ghost) svg.append(layer(data, (p) => at(p, ghost), ghost, [ox, oy], 'ghost', frame.scale));
  for (const s of springs) svg.append(s.kind === 'spring' ? coil(at(s.from, values), at(s.to, values)) : dashpot(at(s.from, values), at(s.to, values)));
  svg.append(layer(data, (p) => at(p, values), values, [ox, oy], 'now', frame.scale));
  points.forEach((p) => {
    const [x, y] = at(p.at, values);
    svg.append(shape('text', { x: x + 11, y: y - 9, class: 'name' }, p.name));
  });
  if (gravity) {
    const [gx, gy] = plane(gravity, values);
    const size = Math.hypot(gx, gy);
    if (size > 0) {
      const [dx, dy] = [(gx / size) * 26, (-gy / size) * 26];
      const [x, y] = [width - 26, 20];
      svg.append(arrow([x, y], [x + dx, y + dy]), shape('text', { x: x - 16, y: y + 16, class: 'name' }, 'g'));
    }
  }
  return svg;
}

/** The frame in which all of some states are seen. */
export function frameOf(data: PanelData, states: readonly Float64Array[]): Frame {
  const all: Point[] = [[0, 0]];
  for (const v of states) {
    for (const p of data.drawing.points) all.push(plane(p.at, v));
    for (const s of data.drawing.springs) all.push(plane(s.from, v), plane(s.to, v));
  }
  const good = all.filter(([x, y]) => Number.isFinite(x) && Number.isFinite(y));
  const [xs, ys] = [good.map((p) => p[0]), good.map((p) => p[1])];
  const [x0, x1, y0, y1] = [Math.min(...xs), Math.max(...xs), Math.min(...ys), Math.max(...ys)];
  const scale = Math.min((width - 2 * margin) / Math.max(x1 - x0, 1e-9), (height - 2 * margin) / Math.max(y1 - y0, 1e-9), 1e6);
  return { scale: scale >= 1e6 ? 100 : scale, middle: [(x0 + x1) / 2, (y0 + y1) / 2] };
}

/** Three dimensions are seen obliquely: x to the right, z up, y into the picture. */
function plane(place: PanelPlace, v: Float64Array): Point {
  const [x, y, z] = place.map((p) => v[p]!);
  return z === undefined ? [x ?? 0, y ?? 0] : [x! - 0.42 * y!, z + 0.3 * y!];
}

function layer(data: PanelData, at: (p: PanelPlace) => Point, v: Float64Array, origin: Point, kind: string, scale: number): SVGElement {
  const group = shape('g', { class: kind });
  const { points, rods } = data.drawing;
  for (const [from, to] of rods) {
    const [a, b] = [at(points[from]!.at), to < 0 ? origin : at(points[to]!.at)];
    group.append(shape('line', { class: 'rod', x1: a[0], y1: a[1], x2: b[0], y2: b[1] }));
    if (to < 0) group.append(shape('path', { class: 'bearing', d: `M${origin[0]} ${origin[1]}l-8 -12h16z` }));
  }
  for (const p of points) {
    const [x, y] = at(p.at);
    if (!Number.isFinite(x) || !Number.isFinite(y)) continue;
    if (p.isBody) {
      const angle = p.angle === undefined ? 0 : v[p.angle]!;
      const length = Math.max(14, Math.min(40, 0.3 * scale));
      group.append(
        shape('rect', { class: 'body', x: -length, y: -6, width: 2 * length, height: 12, rx: 4, transform: `translate(${x} ${y}) rotate(${(-angle * 180) / Math.PI})` }),
        shape('circle', { class: 'centre', cx: x, cy: y, r: 3 }),
      );
    } else group.append(shape('circle', { class: 'mass', cx: x, cy: y, r: 8 }));
  }
  return group;
}

/** A zigzag between two points, with straight ends. */
function coil([x1, y1]: Point, [x2, y2]: Point): SVGElement {
  const length = Math.hypot(x2 - x1, y2 - y1);
  if (!(length > 1)) return shape('g', {});
  const [ux, uy] = [(x2 - x1) / length, (y2 - y1) / length];
  const turns = 8;
  const parts = [`M${x1} ${y1}`];
  for (let k = 0; k <= turns; k++) {
    const along = length * (0.15 + (0.7 * k) / turns);
    const aside = k === 0 || k === turns ? 0 : k % 2 === 0 ? 6 : -6;
    parts.push(`L${x1 + ux * along - uy * aside} ${y1 + uy * along + ux * aside}`);
  }
  return shape('path', { class: 'spring', d: `${parts.join('')}L${x2} ${y2}` });
}

function dashpot([x1, y1]: Point, [x2, y2]: Point): SVGElement {
  const length = Math.hypot(x2 - x1, y2 - y1);
  if (!(length > 1)) return shape('g', {});
  const turn = (Math.atan2(y2 - y1, x2 - x1) * 180) / Math.PI;
  const m = length / 2;
  return shape('path', { class: 'spring', transform: `translate(${x1} ${y1}) rotate(${turn})`, d: `M0 0H${m - 4}M${m - 4} -5V5M${m + 8} -7H${m - 10}M${m + 8} 7H${m - 10}M${m + 8} -7V7M${m + 8} 0H${length}` });
}

function arrow([x1, y1]: Point, [x2, y2]: Point): SVGElement {
  const turn = (Math.atan2(y2 - y1, x2 - x1) * 180) / Math.PI;
  return shape('path', { class: 'arrow', transform: `translate(${x1} ${y1}) rotate(${turn})`, d: `M0 0H${Math.hypot(x2 - x1, y2 - y1)}m-6 -4l6 4l-6 4` });
}

function describe(data: PanelData, v: Float64Array): string {
  const places = data.drawing.points.map((p) => `${p.name} at (${p.at.map((a) => Number(v[a]!.toPrecision(3))).join(', ')})`);
  return `${data.system}: ${places.join('; ')}`;
}
