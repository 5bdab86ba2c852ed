// The controls: which zone, which months, which day.

const byId = id => document.getElementById(id);
const controls = { zone: byId('look-zone'), from: byId('look-from'), to: byId('look-to'), only: byId('look-only'), day: byId('look-day'), time: byId('look-time') };
const state = { zone: data.start_zone, day: data.start_day, shown: null, series: null, carpet: null, share: 0.52 };
let tables = null, asked = 0;

function fail(error) {
  byId('look-said').textContent = 'The data of this report cannot be unpacked: ' + error.message + '. A newer browser may be needed.';
}

// showPeriod draws the months chosen.
async function showPeriod() {
  const zone = state.zone, from = Number(controls.from.value), to = Number(controls.to.value);
  byId('look-period-title').textContent = periodWords(zone, from, to);
  byId('look-totals').replaceChildren(periodTable(totalsOf(zone, from, to)));
  monthColumns(byId('look-months'), zone, from, to);
  const box = byId('look-carpet-box');
  box.hidden = zone < 0 || data.zones[zone].protected === true;
  if (box.hidden) return;
  const carpet = await carpetOf(zone, from, to);
  if (zone !== state.zone || from !== Number(controls.from.value) || to !== Number(controls.to.value)) return; // another choice came in between
  state.carpet = { ...carpet, cellAt: drawCarpet(byId('look-carpet'), carpet) };
  byId('look-carpet').setAttribute('aria-label', 'Outcome of every hour: ' + periodWords(zone, from, to) + '. Choose a day below to read it.');
}

// showDay draws the day chosen; announce tells screen readers.
async function showDay() {
  const zone = state.zone, day = state.day, mine = ++asked;
  controls.day.value = isoOf(day);
  byId('look-before').disabled = day === 0;
  byId('look-after').disabled = day === days - 1;
  byId('look-day-title').textContent = dayWords(day);
  const small = zone >= 0 && data.zones[zone].protected;
  byId('look-reading').hidden = byId('look-table').hidden = zone < 0 || small;
  if (zone < 0) return showAll(day, mine);
  if (small) return showSpan(zone, day, mine);
  const s = await oneDay(zone, day);
  if (mine !== asked) return;
  state.series = s;
  const words = daySummary(zone, day, s);
  state.shown = drawDay(byId('look-picture'), s, day, words);
  listen(state.shown);
  legendOf(byId('look-legend'), [['Outcome', data.outcomes, s.outcome], ['Plant', data.plant, s.plant], ['Weather', data.suits, s.weather]]);
  byId('look-said').textContent = words;
  controls.time.max = s.outcome.length - 1;
  read(Math.floor(state.share * s.outcome.length));
  if (byId('look-table').open) byId('look-hours').replaceChildren(dayTable(s, day));
}

// showAll draws the outcomes of all zones on one day.
async function showAll(day, mine) {
  const m = monthOf(day), open = data.zones.map((z, k) => k).filter(k => !data.zones[k].protected);
  const all = await Promise.all(open.map(k => zoneMonth(k, m)));
  if (mine !== asked) return;
  const lists = all.map(s => cut(s, day, m).outcome);
  state.shown = null;
  drawAll(byId('look-picture'), open, lists, day);
  legendOf(byId('look-legend'), [['Outcome', data.outcomes, lists.flatMap(l => Array.from(l))]]);
  const hidden = data.zones.length - open.length;
  byId('look-said').textContent = `All zones, ${dayWords(day)}: one row per zone` + (hidden ? `; ${hidden} of rooms for few people left out` : '') + '. Choose a zone to see its day.';
}

// showSpan tells a small room's day, or week, in numbers.
async function showSpan(zone, day, mine) {
  const s = await zoneSpans(zone);
  if (mine !== asked) return;
  let k = 0;
  while (k + 1 < s.first_day.length && s.first_day[k + 1] <= day) k++;
  const hours = data.outcomes.map((c, o) => o === 0 ? 0 : s['outcome_' + o + '_min'][k] / 60), value = key => s[key] ? s[key][k] : NaN;
  const last = k + 1 < s.first_day.length ? s.first_day[k + 1] - 1 : days - 1;
  const when = last > s.first_day[k] ? dayWords(s.first_day[k]) + ' to ' + dayWords(last) : dayWords(day);
  const words = `${label(zone)}, ${when}: occupied ${hoursWords(sumOf(hours))}` + (sumOf(hours) > 0 ? ` (${shareList(hours)})` : '') +
    (Number.isFinite(value('temp_c')) ? `; mean indoors ${num(value('temp_c'), 1)}\u00a0°C, comfort limits ${num(value('comfort_low_c'), 1)} to ${num(value('comfort_high_c'), 1)}\u00a0°C on average` : '') + '.';
  state.shown = null;
  byId('look-picture').replaceChildren(make('p', { class: 'note' }, `Privacy: this room is for one to three people, or opens through such a room, so it is shown by ${data.zones[zone].weekly ? 'week' : 'day'} only, without presence, windows and CO2.`));
  legendOf(byId('look-legend'), []);
  byId('look-said').textContent = words;
}

// read puts the reading line at a step and says its values.
function read(step) {
  if (!state.shown || !state.series) return;
  const words = stepWords(state.series, step, state.day);
  state.shown.show(step);
  state.share = (step + 0.5) / state.series.outcome.length;
  controls.time.value = step;
  controls.time.setAttribute('aria-valuetext', words);
  byId('look-values').textContent = words;
}

function listen(shown) {
  shown.svg.addEventListener('pointermove', e => read(shown.stepAt(e.clientX)));
  shown.svg.addEventListener('pointerdown', e => read(shown.stepAt(e.clientX)));
}

function chooseZone(zone) {
  if (!(zone >= -1 && zone < data.zones.length)) return;
  state.zone = zone;
  controls.zone.value = zone;
  state.series = null;
  if (!controls.only.checked) tables && onlyZone(tables, -1); else onlyZone(tables = tables || zoneTables(), zone);
  showPeriod().catch(fail);
  showDay().catch(fail);
}

function chooseDay(day) {
  if (!(day >= 0)) return;
  state.day = Math.max(0, Math.min(days - 1, day));
  showDay().catch(fail);
}

// A click on a carpet of the report chooses its day.
function reportCarpets() {
  for (const id of ['outcome-carpet', 'running-carpet']) {
    const image = document.querySelector('#' + id + '-figure image');
    if (!image || !data.carpets[id]) continue;
    image.classList.add('carpet');
    const carpet = data.carpets[id];
    const place = e => {
      const r = image.getBoundingClientRect();
      return { day: Math.floor((e.clientX - r.left) / r.width * carpet.days), hour: Math.floor((r.bottom - e.clientY) / r.height * 24) };
    };
    image.addEventListener('click', e => {
      chooseDay(dayOf(carpet.first_day) + place(e).day);
      byId('look-day-title').scrollIntoView();
    });
    const hint = image.appendChild(make('svg:title', {}));
    image.addEventListener('pointermove', e => {
      const { day, hour } = place(e), letter = carpet.hours.charCodeAt(24 * day + hour) - 65;
      hint.textContent = carpet.labels[letter] ? `${dateWords(new Date(Date.parse(carpet.first_day + 'T00:00:00Z') + day * 864e5))}, ${two(hour)}:00: ${carpet.labels[letter]}` : '';
    });
  }
}

function start() {
  byId('look').hidden = false;
  controls.zone.addEventListener('change', () => chooseZone(Number(controls.zone.value)));
  controls.only.addEventListener('change', () => chooseZone(state.zone));
  for (const c of [controls.from, controls.to]) {
    c.addEventListener('change', () => {
      const other = c === controls.from ? controls.to : controls.from;
      if (Number(controls.from.value) > Number(controls.to.value)) other.value = c.value;
      showPeriod().catch(fail);
    });
  }
  controls.day.addEventListener('change', () => { if (controls.day.value) chooseDay(dayOf(controls.day.value)); });
  byId('look-before').addEventListener('click', () => chooseDay(state.day - 1));
  byId('look-after').addEventListener('click', () => chooseDay(state.day + 1));
  controls.time.addEventListener('input', () => read(Number(controls.time.value)));
  byId('look-table').addEventListener('toggle', () => { if (byId('look-table').open && state.series) byId('look-hours').replaceChildren(dayTable(state.series, state.day)); });
  const canvas = byId('look-carpet');
  canvas.addEventListener('click', e => {
    const cell = state.carpet && state.carpet.cellAt(e.clientX, e.clientY);
    if (!cell) return;
    chooseDay(state.carpet.first + cell.day - firstDay / 864e5);
    byId('look-day-title').scrollIntoView();
  });
  canvas.addEventListener('pointermove', e => {
    const cell = state.carpet && state.carpet.cellAt(e.clientX, e.clientY);
    const v = cell && state.carpet.days[cell.day] ? state.carpet.days[cell.day][cell.hour] : null;
    byId('look-cell').textContent = v === null || v === undefined ? '' :
      dateWords(new Date((state.carpet.first + cell.day) * 864e5)) + `, ${two(cell.hour)}:00 standard time: ${data.outcomes[v].label}`;
  });
  let resized;
  window.addEventListener('resize', () => { clearTimeout(resized); resized = setTimeout(() => chooseZone(state.zone), 150); });
  reportCarpets();
  chooseZone(state.zone);
}

start();
