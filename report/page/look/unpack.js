// The packed days: which day and zone stands in which block, and its values.

const data = JSON.parse(document.getElementById('day-data').textContent);

// unzip reads base64 of zlib.
async function unzip(text) {
  const bytes = Uint8Array.from(atob(text), c => c.charCodeAt(0));
  const stream = new Blob([bytes]).stream().pipeThrough(new DecompressionStream('deflate'));
  return new Uint8Array(await new Response(stream).arrayBuffer());
}

// unpack reads a block: bits for the series that are there, then for each value
// 0 where unknown, else one more than the zigzag of the difference from the
// last known value, as varints. Unknown is NaN, a series never logged is null.
async function unpack(text, series, steps) {
  const bytes = await unzip(text);
  let at = 0;
  const varint = () => {
    let v = 0, weight = 1, b;
    do {
      b = bytes[at++];
      v += (b & 127) * weight;
      weight *= 128;
    } while (b > 127);
    return v;
  };
  const present = varint(), out = {};
  series.forEach((s, k) => {
    out[s.key] = null;
    if (Math.floor(present / 2 ** k) % 2 === 0) return;
    const values = out[s.key] = new Float64Array(steps);
    for (let i = 0, last = 0; i < steps; i++) {
      const u = varint();
      if (u === 0) { values[i] = NaN; continue; }
      last += u % 2 ? (u - 1) / 2 : -u / 2;
      // Sixteen digits would show 20.700000000000003.
      values[i] = Math.round(last * s.scale * 100) / 100;
    }
  });
  return out;
}

// The last blocks are kept, since neighbouring days are looked at next.
const kept = new Map(), mostKept = 80;

function keptBlock(key, make) {
  if (!kept.has(key)) {
    if (kept.size >= mostKept) kept.delete(kept.keys().next().value);
    kept.set(key, make());
  }
  return kept.get(key);
}

function zoneMonth(zone, month) {
  return keptBlock(zone + '/' + month, () =>
    unpack(data.zones[zone].blocks[month], data.zone_series, data.months[month + 1] - data.months[month]));
}

function weatherMonth(month) {
  return keptBlock('weather/' + month, () =>
    unpack(data.weather[month], data.outdoor_series, data.months[month + 1] - data.months[month]));
}

function zoneSpans(zone) {
  return keptBlock('spans/' + zone, () => unpack(data.zones[zone].spans, data.span_series, data.zones[zone].span_count));
}

const days = data.days.length - 1, months = data.months.length - 1;

function monthOf(day) {
  let m = 0;
  while (m + 1 < months && data.months[m + 1] <= data.days[day]) m++;
  return m;
}

// cut takes the steps of a day out of a month's series.
function cut(series, day, month) {
  const from = data.days[day] - data.months[month], to = data.days[day + 1] - data.months[month], out = {};
  for (const key in series) out[key] = series[key] && series[key].subarray(from, to);
  return out;
}

// oneDay holds a zone's and the weather's series of one day.
async function oneDay(zone, day) {
  const m = monthOf(day);
  const [z, w] = await Promise.all([zoneMonth(zone, m), weatherMonth(m)]);
  return Object.assign(cut(z, day, m), cut(w, day, m));
}

// Local time: the offset in force at a step.
function localOf(step) {
  const utc = data.start_utc + step * data.step_s;
  let offset = 0;
  for (const [from, seconds] of data.offsets) if (from <= utc) offset = seconds;
  return new Date((utc + offset) * 1000); // read with getUTC…
}

const two = n => String(n).padStart(2, '0');
const clockOf = step => { const t = localOf(step); return two(t.getUTCHours()) + ':' + two(t.getUTCMinutes()); };

const firstDay = Date.parse(data.first_day + 'T00:00:00Z');
const dateOf = day => new Date(firstDay + day * 864e5);
const isoOf = day => dateOf(day).toISOString().slice(0, 10);
const dayOf = iso => Math.round((Date.parse(iso + 'T00:00:00Z') - firstDay) / 864e5);
const monthNames = ['January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December'];
const weekdays = ['Sunday', 'Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday'];

// Dates are written by hand: browsers differ in theirs.
const dateWords = t => weekdays[t.getUTCDay()] + ' ' + t.getUTCDate() + ' ' + monthNames[t.getUTCMonth()] + ' ' + t.getUTCFullYear();
const dayWords = day => dateWords(dateOf(day));
const monthShort = (t, room) => monthNames[t.getUTCMonth()].slice(0, room < 26 ? 1 : 3);

function monthWords(month) {
  const t = localOf(data.months[month]);
  return monthNames[t.getUTCMonth()] + ' ' + t.getUTCFullYear();
}
