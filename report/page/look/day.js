// One day of one zone, drawn as panels over one axis of time.

const left = 44, right = 8;

// panelsOf lists what there is to draw: lines against a band, an area, or a
// strip of classes. A panel whose main values are nowhere known says so.
function panelsOf(s) {
  const low = s.suited_high_c && s.suited_high_c.map(() => data.outdoor_low_c);
  const humidity = [s.rh_pct && 'solid: indoors', s.outdoor_rh_pct && 'dashed: outdoors'].filter(Boolean).join(', ');
  return [
    { title: 'Indoor temperature (°C)', key: 'band: comfort limits', height: 120, least: 4, main: [s.temp_c],
      lines: [[s.temp_c, 'line-in']], band: [s.comfort_low_c, s.comfort_high_c, 'band'], missing: 'no indoor temperature is known' },
    { title: 'Outdoor temperature (°C)', key: low && 'band: neither too cold nor too warm', height: 90, least: 6, main: [s.outdoor_temp_c],
      lines: [[s.outdoor_temp_c, 'line-out']], band: low && [low, s.suited_high_c, 'band-out'], missing: 'no outdoor temperature is known' },
    { title: 'Relative humidity (%)', key: humidity, height: 60, least: 30, main: [s.rh_pct, s.outdoor_rh_pct],
      lines: [[s.outdoor_rh_pct, 'line-out dashed'], [s.rh_pct, 'line-in']], missing: 'no humidity is known' },
    { title: 'CO2 (ppm)', key: 'dashed: limit', height: 75, least: 500, main: [s.co2_ppm],
      lines: [[s.co2_limit_ppm, 'line-limit'], [s.co2_ppm, 'line-in']], missing: 'no CO2 is known' },
    { title: 'Windows (share open, %)', height: 34, main: [s.open_share], area: s.open_share && s.open_share.map(v => v * 100), top: 100, class: 'area-open',
      missing: 'how far windows were open is not known' },
    { title: 'People', key: 'grey: occupied times' + (s.people ? '' : '; nobody is counted'), height: 34, area: s.people, shade: s.occupied, class: 'area-people' },
    { title: 'Plant', strip: s.plant, classes: data.plant, height: 14, main: [s.plant], missing: 'no plant is known to serve this zone' },
    { title: 'Weather for open windows', strip: s.weather, classes: data.suits, height: 14, main: [s.weather], missing: 'the zone has no opening to outdoors' },
    { title: 'Outcome', strip: s.outcome, classes: data.outcomes, height: 22 },
  ];
}

// drawDay draws the panels into a box and returns how to put the reading line
// at a step and how to find the step under a pointer.
function drawDay(box, s, day, words) {
  const width = Math.max(260, box.clientWidth), steps = s.outcome.length, from = data.days[day];
  const x = i => left + (width - left - right) * i / steps;
  const svg = make('svg:svg', { role: 'img', 'aria-label': words, width, class: 'day' });
  const grid = svg.appendChild(make('svg:g', {}));
  let y = 4;
  for (const p of panelsOf(s)) {
    const missing = p.main && !p.main.some(list => known(list).length), nothing = p.band && !known(p.band[1]).length;
    svg.append(make('svg:text', { x: 0, y: y + 11, class: 'title' }, p.title, make('svg:tspan', { class: 'faint', dx: 8 }, missing || nothing ? '' : p.key || '')));
    y += 17;
    if (missing) {
      svg.append(make('svg:text', { x: left, y: y + 10, class: 'faint' }, p.missing));
      y += 20;
      continue;
    }
    if (p.strip) strip(svg, p, x, y); else if (p.lines) linesPanel(svg, p, x, y, width); else areaPanel(svg, p, x, y, width);
    y += p.height + 13;
  }
  timeAxis(svg, grid, x, y, from, steps, width);
  svg.setAttribute('height', y + 22);
  svg.setAttribute('viewBox', `0 0 ${width} ${y + 22}`);
  const line = svg.appendChild(make('svg:line', { class: 'reading', y1: 0, y2: y }));
  box.replaceChildren(svg);
  return {
    svg,
    show: i => ['x1', 'x2'].forEach(k => line.setAttribute(k, x(i + 0.5))),
    stepAt: clientX => {
      const r = svg.getBoundingClientRect(), at = (clientX - r.left) * width / r.width;
      return Math.max(0, Math.min(steps - 1, Math.floor((at - left) / (width - left - right) * steps)));
    },
  };
}

// frame draws the lines and numbers of the upright axis.
function frame(svg, x0, x1, ticks, yOf) {
  for (const t of ticks) {
    svg.append(make('svg:line', { class: 'grid', x1: x0, x2: x1, y1: yOf(t), y2: yOf(t) }),
      make('svg:text', { class: 'tick end', x: x0 - 5, y: yOf(t) + 4 }, num(t)));
  }
}

function linesPanel(svg, p, x, y, width) {
  const bandValues = p.band ? [...known(p.band[0]), ...known(p.band[1])] : [];
  const all = [...p.lines.flatMap(l => known(l[0])), ...bandValues];
  let low = all.reduce((a, b) => Math.min(a, b), Infinity), high = all.reduce((a, b) => Math.max(a, b), -Infinity);
  const more = Math.max(0, p.least - (high - low)) / 2 + 0.04 * (high - low);
  low -= more;
  high += more;
  const yOf = v => y + p.height - (v - low) / (high - low) * p.height;
  if (p.band && p.band[0] && p.band[1]) band(svg, p.band, x, yOf);
  frame(svg, left, width - right, ticksOf(low, high, p.height / 22), yOf);
  for (const [list, cls] of p.lines) if (list) svg.append(make('svg:path', { class: cls, d: pathOf(list, x, yOf) }));
}

// pathOf breaks where a value is unknown; a single known step is a short line.
function pathOf(list, x, yOf) {
  let d = '', open = false;
  for (let i = 0; i < list.length; i++) {
    if (!Number.isFinite(list[i])) { open = false; continue; }
    d += (open ? 'L' : 'M') + x(open ? i + 0.5 : i + 0.2).toFixed(1) + ' ' + yOf(list[i]).toFixed(1);
    if (!open || i + 1 === list.length || !Number.isFinite(list[i + 1])) d += 'L' + x(i + 0.8).toFixed(1) + ' ' + yOf(list[i]).toFixed(1);
    open = true;
  }
  return d;
}

function band(svg, [low, high, cls], x, yOf) {
  let fill = '', edge = '';
  const pairs = Array.from(low, (v, i) => v + '/' + high[i]);
  for (const [, a, b] of runs(pairs)) {
    if (!Number.isFinite(low[a]) || !Number.isFinite(high[a]) || high[a] < low[a]) continue;
    const x0 = x(a).toFixed(1), x1 = x(b).toFixed(1), y0 = yOf(low[a]).toFixed(1), y1 = yOf(high[a]).toFixed(1);
    fill += `M${x0} ${y0}H${x1}V${y1}H${x0}Z`;
    edge += `M${x0} ${y0}H${x1}M${x0} ${y1}H${x1}`;
  }
  svg.append(make('svg:path', { class: cls, d: fill }), make('svg:path', { class: cls + '-edge', d: edge }));
}

function areaPanel(svg, p, x, y, width) {
  const top = p.top || Math.max(1, ...known(p.area)), yOf = v => y + p.height - v / top * p.height;
  if (p.shade) {
    for (const [v, a, b] of runs(p.shade)) if (v === 1) svg.append(make('svg:rect', { class: 'occupied', x: x(a), y, width: x(b) - x(a), height: p.height }));
  }
  if (p.area) frame(svg, left, width - right, [0, p.top ? top : Math.floor(top)], yOf);
  if (p.area) {
    let d = '', gaps = '';
    for (const [v, a, b] of runs(p.area)) {
      if (v > 0) d += `M${x(a).toFixed(1)} ${y + p.height}V${yOf(v).toFixed(1)}H${x(b).toFixed(1)}V${y + p.height}Z`;
      if (Number.isNaN(v)) gaps += `M${x(a).toFixed(1)} ${y + p.height / 2}H${x(b).toFixed(1)}`;
    }
    svg.append(make('svg:path', { class: p.class, d }), make('svg:path', { class: 'gap', d: gaps }));
  }
  svg.append(make('svg:line', { class: 'axis', x1: left, x2: width - right, y1: y + p.height, y2: y + p.height }));
}

function strip(svg, p, x, y) {
  const fills = paints(svg, p.classes, p.title.slice(0, 3).toLowerCase() + '-hatch');
  for (const [v, a, b] of runs(p.strip)) {
    const c = Number.isFinite(v) ? p.classes[v] : data.unknown, shown = Number.isFinite(v) ? fills[v] : '#ffffff';
    if (!c) continue;
    svg.append(make('svg:rect', { x: x(a), y, width: x(b) - x(a), height: p.height, fill: shown }, make('svg:title', {}, c.label)));
    if (!Number.isFinite(v)) svg.append(make('svg:path', { class: 'gap', d: `M${x(a)} ${y + p.height / 2}H${x(b)}` }));
  }
  svg.append(make('svg:rect', { class: 'edge', x: x(0), y, width: x(p.strip.length) - x(0), height: p.height }));
}

// timeAxis draws the hours; their lines go behind the panels.
function timeAxis(svg, grid, x, y, from, steps, width) {
  const every = width < 560 ? 6 : 3;
  svg.append(make('svg:line', { class: 'axis', x1: x(0), x2: x(steps), y1: y, y2: y }));
  for (let i = 0; i <= steps; i++) {
    const t = localOf(from + i);
    if (t.getUTCMinutes() || t.getUTCHours() % every) continue;
    const hour = i === steps ? 24 : t.getUTCHours();
    grid.append(make('svg:line', { class: 'grid', x1: x(i), x2: x(i), y1: 18, y2: y + 4 }));
    svg.append(make('svg:text', { class: 'tick ' + (i === steps ? 'end' : 'middle'), x: i === steps ? width : x(i), y: y + 16 }, two(hour) + ':00'));
  }
}

// drawAll draws one strip of outcomes per zone.
function drawAll(box, zones, lists, day) {
  const width = Math.max(260, box.clientWidth), steps = lists.length ? lists[0].length : 1, names = Math.min(220, width * 0.36), from = data.days[day];
  const x = i => names + (width - names - right) * i / steps, high = 15;
  const svg = make('svg:svg', { role: 'img', 'aria-label': 'Outcomes of all zones, ' + dayWords(day), width, class: 'day' });
  const fills = paints(svg, data.outcomes, 'all-hatch'), grid = svg.appendChild(make('svg:g', {}));
  let y = 20;
  zones.forEach((zone, k) => {
    const most = Math.floor(names / 6.2), name = label(zone);
    svg.append(make('svg:text', { x: 0, y: y + 11, class: 'tick' }, name.length > most ? name.slice(0, most - 1) + '…' : name));
    for (const [v, a, b] of runs(lists[k])) {
      if (v > 0) svg.append(make('svg:rect', { x: x(a), y, width: x(b) - x(a), height: high - 3, fill: fills[v] }, make('svg:title', {}, name + ': ' + data.outcomes[v].label)));
    }
    y += high;
  });
  timeAxis(svg, grid, x, y, from, steps, width);
  svg.setAttribute('height', y + 22);
  svg.setAttribute('viewBox', `0 0 ${width} ${y + 22}`);
  box.replaceChildren(svg);
}
