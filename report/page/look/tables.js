// The report's own tables, by zone.

// zoneTables finds the tables whose rows are zones, by their row headings.
function zoneTables() {
  const names = new Set(data.zones.map(z => z.label)), out = [];
  for (const table of document.querySelectorAll('.chapter table')) {
    const rows = [...table.tBodies[0].rows].map(row => [row, row.cells[0].textContent.trim()]);
    const matching = rows.filter(r => names.has(r[1]));
    if (matching.length > 0 && matching.length * 2 > rows.length) out.push({ table, rows: matching });
  }
  return out;
}

// onlyZone hides the rows of other zones on the screen, or shows all again
// (zone -1), and says so under each table. Print has them all.
function onlyZone(tables, zone) {
  for (const t of tables) {
    let shown = 0;
    for (const [row, name] of t.rows) {
      row.classList.toggle('other', zone >= 0 && name !== label(zone));
      shown += row.matches('.other') ? 0 : 1;
    }
    if (!t.said) {
      t.said = make('p', { class: 'foot only' });
      t.table.closest('.table').append(t.said);
    }
    t.said.hidden = zone < 0;
    t.said.textContent = zone < 0 ? '' : shown > 0 ? 'Only rows of ' + label(zone) + ' are shown (chosen under “Look closer”).' : label(zone) + ' has no row in this table.';
  }
}
