// Small tools to draw and to write numbers.

const svgName = 'http://www.w3.org/2000/svg';

// make makes an element with attributes, text or children.
function make(name, attributes, ...inside) {
  const e = name.startsWith('svg:') ? document.createElementNS(svgName, name.slice(4)) : document.createElement(name);
  for (const k in attributes) if (attributes[k] !== undefined) e.setAttribute(k, attributes[k]);
  e.append(...inside);
  return e;
}

const num = (v, decimals = 0) => Number.isFinite(v) ? v.toLocaleString('en-GB', { minimumFractionDigits: decimals, maximumFractionDigits: decimals }) : '–';

// hoursWords writes hours to a tenth, whole from ten.
const hoursWords = h => num(h, h < 9.95 && h > 0 ? 1 : 0) + '\u00a0h';

const known = list => list ? Array.from(list).filter(Number.isFinite) : [];
const mean = list => list.reduce((a, b) => a + b, 0) / list.length;

// hatches adds the patterns of the classes that have one and returns the paint
// of each class.
function paints(svg, classes, prefix) {
  const defs = svg.appendChild(make('svg:defs', {}));
  return classes.map((c, k) => {
    if (!c.hatch) return c.fill;
    const id = prefix + k;
    const p = defs.appendChild(make('svg:pattern', { id, width: 6, height: 6, patternUnits: 'userSpaceOnUse' }));
    p.append(make('svg:rect', { width: 6, height: 6, fill: c.fill }));
    for (const d of lines[c.hatch]) p.append(make('svg:path', { d, stroke: c.ink, 'stroke-width': 1, fill: 'none' }));
    return 'url(#' + id + ')';
  });
}

const lines = {
  rising: ['M-1 7L7 -1M-1 1L1 -1M5 7L7 5'], falling: ['M-1 -1L7 7M5 -1L7 1M-1 5L1 7'], level: ['M0 3H6'], upright: ['M3 0V6'],
  crossed: ['M-1 7L7 -1M-1 1L1 -1M5 7L7 5', 'M-1 -1L7 7M5 -1L7 1M-1 5L1 7'],
};

// swatchOf is a legend key of a class.
function swatchOf(c, prefix) {
  const s = make('svg:svg', { width: 14, height: 11, 'aria-hidden': 'true', class: 'key' });
  const [fill] = paints(s, [c], prefix);
  s.append(make('svg:rect', { x: 0.5, y: 0.5, width: 13, height: 10, fill, stroke: '#6b6b6b' }));
  return s;
}

// runs gives the stretches of equal values: [value, from, to).
function runs(list) {
  const out = [];
  for (let i = 0; i < list.length; i++) {
    const last = out[out.length - 1];
    if (last && Object.is(last[0], list[i])) last[2] = i + 1; else out.push([list[i], i, i + 1]);
  }
  return out;
}

// ticksOf gives round ticks between two values, about so many.
function ticksOf(low, high, most) {
  const raw = (high - low) / most, power = 10 ** Math.floor(Math.log10(raw));
  const step = [1, 2, 5, 10].map(k => k * power).find(s => s >= raw - 1e-9);
  const out = [];
  for (let v = Math.ceil(low / step - 1e-9) * step; v <= high + 1e-9; v += step) out.push(Math.round(v * 1e6) / 1e6 || 0); // no minus zero
  return out;
}
