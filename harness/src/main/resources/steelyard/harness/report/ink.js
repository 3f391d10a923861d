// Ink: colours and patterns. Backends have colours, failures have red, all else is ink and paper.

// Okabe and Ito, "Color Universal Design" (2008), vermillion last because it is nearest to the red of failures;
// their black is the page's ink.
const PALETTE = ['#E69F00', '#56B4E9', '#009E73', '#F0E442', '#0072B2', '#CC79A7', 'ink', '#D55E00'];
const DASHES = [[], [7, 3], [2, 3], [9, 3, 2, 3]];
const HATCHES = ['none', 'rising', 'dots', 'cross'];
const CAUSE_HATCHES = ['none', 'rising', 'falling', 'dots', 'cross', 'level', 'upright', 'grid', 'sparse'];

let ink = {};

/** Reads the page's colours; again after the scheme or the medium changed. */
function mixInk() {
  const style = getComputedStyle(document.documentElement);
  ink = {};
  for (const name of ['paper', 'ink', 'soft', 'hair', 'failure']) {
    ink[name] = style.getPropertyValue('--' + name).trim();
  }
  ink.font = '11px ' + style.getPropertyValue('--sans').trim();
  ink.byDay = parseInt(ink.paper.slice(1, 3), 16) > 127;
  ink.patterns = new Map();
}

function backendColour(index) {
  const colour = PALETTE[index % PALETTE.length];
  return colour === 'ink' ? ink.ink : colour;
}

function backendDash(index) {
  return DASHES[Math.floor(index / PALETTE.length) % DASHES.length];
}

function backendFill(index) {
  return hatched(backendColour(index), HATCHES[Math.floor(index / PALETTE.length) % HATCHES.length], ink.paper, 1);
}

function causeFill(index) {
  const kind = CAUSE_HATCHES[index % CAUSE_HATCHES.length];
  return kind === 'none' ? ink.failure : hatched(ink.paper, kind, ink.failure, 1);
}

/** How each standing is filled: the backend's colour for what serves, ink for what does not. */
function standingFill(word, index) {
  const colour = index === null ? ink.ink : backendColour(index);
  switch (word) {
    case 'up':
      return veiled(colour, 0.5);
    case 'warming':
      return hatched(ink.paper, 'rising', colour, 1);
    case 'draining':
      return hatched(ink.paper, 'level', colour, 1);
    case 'down':
      return hatched(ink.paper, 'cross', ink.soft, 0.75);
    case 'benched':
      return hatched(ink.paper, 'upright', ink.soft, 0.9);
    case 'withdrawn':
      return hatched(ink.paper, 'sparse', ink.soft, 0.7);
    default:
      return ink.paper;
  }
}

/** A colour let through to the paper by so much. */
function veiled(colour, alpha) {
  const number = parseInt(colour.slice(1), 16);
  return `rgba(${number >> 16}, ${(number >> 8) & 255}, ${number & 255}, ${alpha})`;
}

function hatched(ground, kind, line, alpha) {
  if (kind === 'none') return ground;
  const key = [ground, kind, line, alpha].join();
  if (!ink.patterns.has(key)) ink.patterns.set(key, hatch(ground, kind, line, alpha));
  return ink.patterns.get(key);
}

function hatch(ground, kind, line, alpha) {
  const scale = window.devicePixelRatio || 1;
  const size = kind === 'sparse' ? 10 : 6;
  const tile = document.createElement('canvas');
  tile.width = tile.height = Math.round(size * scale);
  const draw = tile.getContext('2d');
  draw.scale(tile.width / size, tile.height / size);
  draw.fillStyle = ground;
  draw.fillRect(0, 0, size, size);
  draw.strokeStyle = draw.fillStyle = line;
  draw.globalAlpha = alpha;
  draw.lineWidth = 1.6;
  HATCH[kind](draw, size);
  return draw.createPattern(tile, 'repeat');
}

function strokes(draw, ...lines) {
  draw.beginPath();
  for (const [x0, y0, x1, y1] of lines) {
    draw.moveTo(x0, y0);
    draw.lineTo(x1, y1);
  }
  draw.stroke();
}

// Diagonals run past the tile's edges so that tiles join without a seam.
const RISING = (s) => [[-1, s + 1, s + 1, -1], [-1, 1, 1, -1], [s - 1, s + 1, s + 1, s - 1]];
const FALLING = (s) => [[-1, -1, s + 1, s + 1], [s - 1, -1, s + 1, 1], [-1, s - 1, 1, s + 1]];
const HATCH = {
  rising: (draw, s) => strokes(draw, ...RISING(s)),
  falling: (draw, s) => strokes(draw, ...FALLING(s)),
  cross: (draw, s) => {
    draw.lineWidth = 0.9;
    strokes(draw, ...RISING(s), ...FALLING(s));
  },
  level: (draw, s) => strokes(draw, [0, s / 2, s, s / 2]),
  upright: (draw, s) => strokes(draw, [s / 2, 0, s / 2, s]),
  grid: (draw, s) => {
    draw.lineWidth = 1;
    strokes(draw, [0, s / 2, s, s / 2], [s / 2, 0, s / 2, s]);
  },
  dots: (draw, s) => draw.fillRect(s / 2 - 1, s / 2 - 1, 2, 2),
  sparse: (draw, s) => draw.fillRect(s / 2 - 1, s / 2 - 1, 2, 2),
};

/** A small sample of a fill or a line, for the readout. */
function sample(paint) {
  const canvas = document.createElement('canvas');
  const scale = window.devicePixelRatio || 1;
  canvas.className = 'sample';
  canvas.width = 18 * scale;
  canvas.height = 10 * scale;
  canvas.setAttribute('aria-hidden', 'true');
  const draw = canvas.getContext('2d');
  draw.scale(scale, scale);
  paint(draw);
  return canvas;
}

function fillSample(fill) {
  return sample((draw) => {
    draw.fillStyle = fill;
    draw.fillRect(0, 0, 18, 10);
    draw.strokeStyle = ink.soft;
    draw.lineWidth = 1;
    draw.strokeRect(0.5, 0.5, 17, 9);
  });
}

function lineSample(width, dash, colour) {
  return sample((draw) => {
    draw.strokeStyle = colour;
    draw.lineWidth = width;
    draw.setLineDash(dash);
    strokes(draw, [0, 5, 18, 5]);
  });
}
