/**
 * Draws the extension's icon, media/icon.svg and media/icon.png, from one list of shapes: a pendulum with its trace, and
 * a second, fainter one beside it that does not quite agree. Run it after changing the shapes; the files are kept.
 */
import { writeFileSync } from 'node:fs';
import { deflateSync } from 'node:zlib';

const size = 256;
const samples = 4;

const ground = [20, 40, 62];
const pivot = [128, 46];
const length = 138;
const bob = (angle) => [pivot[0] + length * Math.sin(angle), pivot[1] + length * Math.cos(angle)];
const code = bob(-0.42);
const physics = bob(0.3);

/** Painted in order. Colours are red, green, blue, opacity. */
const shapes = [
  { kind: 'arc', centre: pivot, radius: length, from: -0.78, to: 0.66, width: 5, colour: [255, 255, 255, 0.28] },
  { kind: 'line', from: pivot, to: code, width: 7, colour: [240, 112, 80, 0.75] },
  { kind: 'disc', centre: code, radius: 21, colour: [240, 112, 80, 0.85] },
  { kind: 'line', from: pivot, to: physics, width: 9, colour: [246, 214, 120, 1] },
  { kind: 'disc', centre: physics, radius: 29, colour: [246, 214, 120, 1] },
  { kind: 'line', from: [80, pivot[1]], to: [176, pivot[1]], width: 10, colour: [255, 255, 255, 1] },
  { kind: 'disc', centre: pivot, radius: 9, colour: [255, 255, 255, 1] },
];

function toSegment([x, y], [ax, ay], [bx, by]) {
  const t = Math.max(0, Math.min(1, ((x - ax) * (bx - ax) + (y - ay) * (by - ay)) / ((bx - ax) ** 2 + (by - ay) ** 2)));
  return Math.hypot(x - ax - t * (bx - ax), y - ay - t * (by - ay));
}

function inside(shape, point) {
  if (shape.kind === 'disc') {
    return Math.hypot(point[0] - shape.centre[0], point[1] - shape.centre[1]) <= shape.radius;
  }
  if (shape.kind === 'line') return toSegment(point, shape.from, shape.to) <= shape.width / 2;
  const angle = Math.atan2(point[0] - shape.centre[0], point[1] - shape.centre[1]);
  const distance = Math.hypot(point[0] - shape.centre[0], point[1] - shape.centre[1]);
  return angle >= shape.from && angle <= shape.to && Math.abs(distance - shape.radius) <= shape.width / 2;
}

/** The ground: a square with round corners. */
function onGround([x, y]) {
  const corner = 44;
  const dx = Math.max(corner - x, x - (size - corner), 0);
  const dy = Math.max(corner - y, y - (size - corner), 0);
  return Math.hypot(dx, dy) <= corner;
}

function colourAt(point) {
  if (!onGround(point)) return [0, 0, 0, 0];
  let colour = [...ground];
  for (const shape of shapes) {
    if (!inside(shape, point)) continue;
    const [r, g, b, opacity] = shape.colour;
    colour = [r, g, b].map((value, i) => value * opacity + colour[i] * (1 - opacity));
  }
  return [...colour, 255];
}

function pixel(column, row) {
  const sum = [0, 0, 0, 0];
  for (let i = 0; i < samples * samples; i++) {
    const point = [column + ((i % samples) + 0.5) / samples, row + (Math.floor(i / samples) + 0.5) / samples];
    const [r, g, b, a] = colourAt(point);
    sum[0] += r * a;
    sum[1] += g * a;
    sum[2] += b * a;
    sum[3] += a;
  }
  const opacity = sum[3] || 1;
  return [sum[0] / opacity, sum[1] / opacity, sum[2] / opacity, sum[3] / samples ** 2].map(Math.round);
}

function crc32(bytes) {
  let crc = ~0;
  for (const byte of bytes) {
    crc ^= byte;
    for (let k = 0; k < 8; k++) crc = crc & 1 ? (crc >>> 1) ^ 0xedb88320 : crc >>> 1;
  }
  return ~crc >>> 0;
}

function chunk(type, data) {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(data.length);
  const check = Buffer.alloc(4);
  check.writeUInt32BE(crc32(body));
  return Buffer.concat([length, body, check]);
}

function png() {
  const rows = [];
  for (let row = 0; row < size; row++) {
    rows.push(0);
    for (let column = 0; column < size; column++) rows.push(...pixel(column, row));
  }
  const header = Buffer.alloc(13);
  header.writeUInt32BE(size, 0);
  header.writeUInt32BE(size, 4);
  header.set([8, 6, 0, 0, 0], 8);
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(Buffer.from(rows), { level: 9 })),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

function svg() {
  const n = (value) => Number(value.toFixed(2));
  const paint = ([r, g, b, opacity]) => `rgb(${r},${g},${b})" opacity="${opacity}`;
  const onArc = ({ centre, radius }, angle) =>
    `${n(centre[0] + radius * Math.sin(angle))} ${n(centre[1] + radius * Math.cos(angle))}`;
  const drawn = shapes.map((s) => {
    if (s.kind === 'disc') {
      return `<circle cx="${n(s.centre[0])}" cy="${n(s.centre[1])}" r="${s.radius}" fill="${paint(s.colour)}"/>`;
    }
    const stroke = `stroke-width="${s.width}" stroke="${paint(s.colour)}"`;
    if (s.kind === 'line') {
      const [[ax, ay], [bx, by]] = [s.from, s.to];
      return `<path d="M${n(ax)} ${n(ay)}L${n(bx)} ${n(by)}" stroke-linecap="round" ${stroke}/>`;
    }
    return `<path d="M${onArc(s, s.from)}A${s.radius} ${s.radius} 0 0 0 ${onArc(s, s.to)}" fill="none" ${stroke}/>`;
  });
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${size} ${size}">`,
    `<rect width="${size}" height="${size}" rx="44" fill="rgb(${ground})"/>`,
    ...drawn,
    '</svg>',
    '',
  ].join('\n');
}

const media = new URL('../media/', import.meta.url);
writeFileSync(new URL('icon.svg', media), svg());
writeFileSync(new URL('icon.png', media), png());
