// A day in words: its summary, what stands under the reading line, its table.

const label = zone => data.zones[zone].label;
const className = (classes, v) => Number.isFinite(v) && classes[v] ? classes[v].label : 'not known';
const span = (list, decimals, unit) => {
  const k = known(list);
  return k.length ? num(Math.min(...k), decimals) + ' to ' + num(Math.max(...k), decimals) + '\u00a0' + unit : '';
};

// outcomeHours adds up the occupied outcomes of a day.
function outcomeHours(s) {
  const out = data.outcomes.map(() => 0);
  for (const v of s.outcome) out[v] += data.step_s / 3600;
  out[0] = 0; // not occupied
  return out;
}

const sumOf = list => list.reduce((a, b) => a + b, 0);

// shareList says the parts of the occupied time, the longest first.
function shareList(hours) {
  return hours.map((h, k) => [h, k]).filter(p => p[0] > 0).sort((a, b) => b[0] - a[0])
    .map(([h, k]) => data.outcomes[k].label + ' ' + hoursWords(h)).join('; ');
}

function daySummary(zone, day, s) {
  const hours = outcomeHours(s), occupied = sumOf(hours), parts = [];
  const add = (name, words) => { if (words) parts.push(name + ' ' + words); };
  add('indoors', span(s.temp_c, 1, '°C'));
  add('outdoors', span(s.outdoor_temp_c, 1, '°C'));
  const co2 = known(s.co2_ppm);
  if (co2.length) parts.push('CO2 up to ' + num(Math.max(...co2)) + '\u00a0ppm');
  return `${label(zone)}, ${dayWords(day)}: ` +
    (occupied > 0 ? `occupied ${hoursWords(occupied)} (${shareList(hours)})` : 'not occupied') + (parts.length ? '; ' + parts.join('; ') : '') + '.';
}

function stepWords(s, i, day) {
  const parts = [], add = (name, v, decimals, unit) => { if (Number.isFinite(v)) parts.push(name + num(v, decimals) + '\u00a0' + unit); };
  const at = key => s[key] ? s[key][i] : NaN;
  add('indoors ', at('temp_c'), 1, '°C');
  if (Number.isFinite(at('comfort_low_c'))) parts.push('comfort ' + num(at('comfort_low_c'), 1) + ' to ' + num(at('comfort_high_c'), 1) + '\u00a0°C');
  add('outdoors ', at('outdoor_temp_c'), 1, '°C');
  add('humidity ', at('rh_pct'), 0, '%');
  add('outdoor humidity ', at('outdoor_rh_pct'), 0, '%');
  add('CO2 ', at('co2_ppm'), 0, 'ppm');
  add('wind ', at('wind_m_s'), 1, 'm/s');
  if (at('rain_mm_h') > 0) add('rain ', at('rain_mm_h'), 1, 'mm/h');
  if (s.open_share) parts.push(Number.isFinite(at('open_share')) ? 'windows ' + num(at('open_share') * 100) + '\u00a0% open' : 'windows not known');
  if (s.plant) parts.push('plant ' + className(data.plant, at('plant')));
  add('', at('people'), 0, 'people');
  if (s.weather) parts.push('weather: ' + className(data.suits, at('weather')));
  parts.push(data.outcomes[s.outcome[i]].label);
  return clockOf(data.days[day] + i) + ': ' + parts.join(' · ');
}

// dayTable tells the day hour by hour.
function dayTable(s, day) {
  const head = ['Hour', 'Indoors °C', 'Comfort °C', 'Outdoors °C', 'Humidity %', 'CO2 ppm', 'Windows open %', 'Plant', 'Outcome'];
  const body = make('tbody', {}), from = data.days[day];
  const starts = [];
  for (let i = 0; i < s.outcome.length; i++) if (i === 0 || !localOf(from + i).getUTCMinutes()) starts.push(i);
  starts.forEach((a, k) => {
    const b = k + 1 < starts.length ? starts[k + 1] : s.outcome.length;
    const part = key => known(s[key] && s[key].subarray(a, b));
    const average = (key, decimals, scale = 1) => { const v = part(key); return v.length ? num(mean(v) * scale, decimals) : '–'; };
    const longest = (key, classes) => {
      const list = s[key] ? Array.from(s[key].subarray(a, b)) : [];
      const count = list.map(v => list.filter(w => Object.is(v, w)).length);
      return list.length ? className(classes, list[count.indexOf(Math.max(...count))]) : '–';
    };
    body.append(make('tr', {}, make('th', { scope: 'row' }, clockOf(from + a)),
      ...[average('temp_c', 1), average('comfort_low_c', 1) + ' to ' + average('comfort_high_c', 1), average('outdoor_temp_c', 1), average('rh_pct', 0),
        average('co2_ppm', 0), average('open_share', 0, 100)].map(t => make('td', { class: 'n' }, t)),
      make('td', {}, longest('plant', data.plant)), make('td', {}, longest('outcome', data.outcomes))));
  });
  return make('table', { 'aria-label': 'The day by hour' }, make('thead', {}, make('tr', {}, ...head.map((t, k) => make('th', { scope: 'col', class: k > 0 && k < 7 ? 'n' : undefined }, t)))), body);
}

// legendOf lists, group by group, the classes that occur: groups are
// [name, classes, values].
function legendOf(box, groups) {
  box.replaceChildren(...groups.flatMap(([name, classes, values]) => {
    const there = new Set(values || []), keys = classes.map((c, k) => there.has(k) ? make('span', {}, swatchOf(c, 'key-' + name + k), ' ' + c.label) : '').filter(Boolean);
    return keys.length ? [make('li', {}, name + ': ', ...keys)] : [];
  }));
}
