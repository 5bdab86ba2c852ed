// A zone, or the average occupant, over a range of months.

// totalsOf adds up hours from one month to another: zone -1 is the average
// occupant. Its values stand in the order of data.total_keys.
function totalsOf(zone, from, to) {
  const out = data.total_keys.map(() => 0);
  for (let m = from; m <= to; m++) data.totals[m][zone + 1].forEach((v, k) => { out[k] += v < 0 ? Number.NaN : v / 100; }); // below 0: not known
  return out;
}

const totalAt = (totals, key) => totals[data.total_keys.indexOf(key)];

function periodWords(zone, from, to) {
  const name = zone < 0 ? 'All zones (the average occupant)' : label(zone);
  return name + ', ' + monthWords(from) + (to > from ? ' to ' + monthWords(to) : '');
}

function periodTable(totals) {
  const occupied = totalAt(totals, 'occupied'), body = make('tbody', {});
  const row = (head, h, of) => body.append(make('tr', {}, make('th', { scope: 'row' }, ...head), make('td', { class: 'n' }, num(h, h < 100 ? 1 : 0)),
    make('td', { class: 'n' }, of > 0 && h >= 0 ? num(100 * h / of, 100 * h / of < 10 ? 1 : 0) + '\u00a0%' : '–')));
  data.outcomes.forEach((c, k) => { if (k > 0 && totals[k] > 0) row([swatchOf(c, 'total' + k), ' ' + c.label], totals[k], occupied); });
  row([make('b', {}, 'occupied')], occupied, occupied);
  row(['weather suitable'], totalAt(totals, 'suited'), occupied);
  row(['too warm by the headline criterion, where known'], totalAt(totals, 'over'), occupied);
  row(['too cool by it, where known'], totalAt(totals, 'under'), occupied);
  row(['above the CO2 limit, where known'], totalAt(totals, 'co2_over'), occupied);
  return make('table', { 'aria-labelledby': 'look-period-title' }, make('thead', {}, make('tr', {}, make('th', { scope: 'col' }, 'Outcome'),
    make('th', { scope: 'col', class: 'n' }, 'Hours'), make('th', { scope: 'col', class: 'n' }, 'Share of occupied'))), body);
}

// monthColumns draws occupied hours per month by outcome.
function monthColumns(box, zone, from, to) {
  const width = Math.max(260, box.clientWidth), height = 190, base = height - 22, n = to - from + 1;
  const rows = [];
  for (let m = from; m <= to; m++) rows.push(totalsOf(zone, m, m));
  const most = Math.max(1, ...rows.map(r => totalAt(r, 'occupied')));
  const svg = make('svg:svg', { role: 'img', 'aria-label': 'Occupied hours per month by outcome: ' + periodWords(zone, from, to), width, height, viewBox: `0 0 ${width} ${height}` });
  const fills = paints(svg, data.outcomes, 'month-hatch'), yOf = v => base - v / most * (base - 20);
  svg.append(make('svg:text', { x: 0, y: 11, class: 'title' }, 'Occupied hours per month (h)'));
  frame(svg, left, width - right, ticksOf(0, most, 4), yOf);
  const slot = (width - left - right) / n, wide = Math.min(46, slot * 0.72);
  rows.forEach((r, k) => {
    let y = base;
    const x0 = left + slot * k + (slot - wide) / 2, month = localOf(data.months[from + k]);
    data.outcomes.forEach((c, o) => {
      const h = o > 0 ? r[o] : 0;
      if (!(h > 0)) return;
      const tall = base - yOf(h);
      y -= tall;
      svg.append(make('svg:rect', { x: x0, y, width: wide, height: tall, fill: fills[o], class: 'part' },
        make('svg:title', {}, `${monthWords(from + k)}: ${c.label} ${hoursWords(h)}`)));
    });
    svg.append(make('svg:text', { class: 'tick middle', x: x0 + wide / 2, y: base + 15 }, monthShort(month, slot)));
  });
  svg.append(make('svg:line', { class: 'axis', x1: left, x2: width - right, y1: base, y2: base }));
  box.replaceChildren(svg);
}

// carpetOf gives the outcome that lasted longest in each hour of standard time,
// by day, null where nothing is known.
async function carpetOf(zone, from, to) {
  const offset = Math.min(...data.offsets.map(o => o[1]));
  const first = Math.floor((data.start_utc + data.months[from] * data.step_s + offset) / 86400), out = [];
  for (let m = from; m <= to; m++) {
    const s = await zoneMonth(zone, m);
    let last = -1, votes;
    s.outcome.forEach((v, i) => {
      const hour = Math.floor((data.start_utc + (data.months[m] + i) * data.step_s + offset) / 3600);
      if (hour !== last) { last = hour; votes = {}; }
      votes[v] = (votes[v] || 0) + 1;
      const day = Math.floor(hour / 24) - first, cell = hour - 24 * (first + day);
      out[day] = out[day] || Array(24).fill(null);
      if (out[day][cell] === null || votes[v] > (votes[out[day][cell]] || 0)) out[day][cell] = v;
    });
  }
  return { first, days: out };
}

// drawCarpet paints one cell per day and hour and returns how to find the cell
// under a pointer.
function drawCarpet(canvas, carpet) {
  const n = carpet.days.length, width = Math.max(260, canvas.parentElement.clientWidth), height = 132;
  const sharp = Math.min(3, window.devicePixelRatio || 1);
  canvas.width = Math.round(width * sharp);
  canvas.height = Math.round(height * sharp);
  const c = canvas.getContext('2d');
  c.scale(sharp, sharp);
  c.font = '11px "Liberation Sans", Arial, sans-serif';
  c.fillStyle = '#fff';
  c.fillRect(0, 0, width, height);
  const bottom = height - 18, w = (width - left - right) / n, h = (bottom - 6) / 24;
  carpet.days.forEach((day, d) => day && day.forEach((v, hour) => {
    if (!v) return;
    c.fillStyle = data.outcomes[v].fill;
    c.fillRect(left + d * w, bottom - (hour + 1) * h, Math.max(1, w + 0.3), h + 0.3);
    if (data.outcomes[v].hatch === 'rising' && v === data.outcomes.length - 1) {
      c.fillStyle = data.outcomes[v].ink; // unknown is dotted
      c.fillRect(left + d * w, bottom - (hour + 0.6) * h, Math.max(0.7, w / 3), 1);
    }
  }));
  c.fillStyle = '#262626';
  c.strokeStyle = '#808080';
  c.lineWidth = 1;
  c.textAlign = 'end';
  for (const hour of [0, 6, 12, 18, 24]) c.fillText(hour, left - 5, bottom - hour * h + 4);
  c.strokeRect(left, bottom - 24 * h, width - left - right, 24 * h);
  c.textAlign = 'center';
  let begun = 0;
  for (let d = 1; d <= n; d++) {
    const at = new Date((carpet.first + d - 1) * 864e5), next = new Date((carpet.first + d) * 864e5);
    if (d < n && next.getUTCMonth() === at.getUTCMonth()) continue;
    const name = monthShort(at, (d - begun) * w);
    if ((d - begun) * w > 9) c.fillText(name, left + (begun + d) / 2 * w, height - 4);
    if (d < n) { c.beginPath(); c.moveTo(left + d * w, bottom); c.lineTo(left + d * w, bottom + 4); c.stroke(); }
    begun = d;
  }
  return (clientX, clientY) => {
    const r = canvas.getBoundingClientRect();
    const day = Math.floor(((clientX - r.left) * width / r.width - left) / w), hour = Math.floor((bottom - (clientY - r.top) * height / r.height) / h);
    return day >= 0 && day < n && hour >= 0 && hour < 24 ? { day, hour } : null;
  };
}
