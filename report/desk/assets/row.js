// Draws the row under check: what its cells share, the cells, and the cell in
// focus with its fields, its working and its flags.
import { el } from './dom.js';
import { FIELDS, STATES, printed, spread, who } from './words.js';

const SHARED = [['given_as', 'the spread is'], ['level', 'level'], ['n', 'n'], ['unit', 'unit'], ['outcome', 'outcome'], ['adjusted', 'adjusted']];
const GIVEN = { ci: 'a confidence interval', sd: 'an SD', se: 'an SE', iqr: 'quartiles', range: 'a range', unstated: 'not said in the paper' };

const source = (w, field) => (w.record.places ?? []).find((p) => p.field === field);

export function fromWords(w, field) {
  const p = source(w, field);
  if (!p) return '';
  const at = p.page ? `page ${p.page}` : '';
  return [p.from, at, p.text && `“${p.text.slice(0, 80)}”`].filter(Boolean).join(', ');
}

// shared gives the facts that hold for every cell of the row.
export function shared(cells) {
  const out = [];
  for (const [field, label] of SHARED) {
    const values = new Set(cells.map((c) => String(c.working.record[field] ?? '')));
    if (values.size !== 1) continue;
    const [value] = values;
    if (value === '' && field !== 'n') continue;
    const text = field === 'given_as' ? (GIVEN[value] ?? value) : field === 'level' ? `${value}%` : value || 'not stated';
    out.push([label, text, fromWords(cells[0].working, field)]);
  }
  return out;
}

export function rowView(row, current, choose, hidden) {
  const where = [row.paper_name, row.page && `page ${row.page}`, row.table ?? row.section].filter(Boolean).join(' · ');
  return [
    el('p', {}, where),
    el('h2', {}, row.star ? '★ ' : '', row.cells[0].working.record.outcome ?? row.cells[0].working.record.heading ?? 'Result in the text'),
    row.cells.length > 1 && !hidden && el('h3', {}, 'Holds for all cells of this row'),
    row.cells.length > 1 && !hidden && el('dl', { class: 'shared' }, shared(row.cells).map(([k, v, f]) => [el('dt', {}, k), el('dd', {}, v, ' ', el('span', { class: 'from' }, f))])),
    el('ol', { class: 'cells', 'aria-label': 'Cells of this row' }, row.cells.map((cell, i) => el('li', {}, cellCard(cell, i === current, () => choose(i), hidden)))),
  ];
}

function cellCard(cell, current, choose, hidden) {
  const r = cell.working.record;
  const veil = hidden && cell.state === 'open';
  return el('button', { type: 'button', 'data-id': r.id, 'aria-current': current ? 'true' : 'false', onclick: choose },
    el('span', { class: 'who' }, who(r)),
    el('span', { class: 'print' }, veil ? 'see the page' : printed(r)),
    el('span', { class: 'sd' }, veil ? '' : spread(r), !veil && r.n ? `, n ${r.n}` : ''),
    el('span', { class: 'state' }, el('b', {}, STATES[cell.state] ?? cell.state), ` · reading ${r.reading}`));
}

export function fieldsView(cell) {
  const r = cell.working.record;
  return el('dl', { class: 'fields' }, FIELDS.filter(([f]) => r[f] !== null && r[f] !== undefined && r[f] !== '').map(([f, label]) => [
    el('dt', {}, label), el('dd', {}, String(r[f]), ' ', el('span', { class: 'from' }, cell.changed?.includes(f) ? 'amended by hand' : fromWords(cell.working, f)))]));
}

export function workingView(w) {
  const t = w.trail ?? {}, r = w.record;
  return [
    el('h3', {}, 'Working'),
    el('p', {}, r.use === 'withheld' ? `SD withheld: ${r.reason}` : `${spread(r)}${r.sd_of ? ` of ${r.sd_of}` : ''}${r.use === 'printed' ? ', as printed' : ''}`),
    t.steps?.length > 0 && el('pre', { class: 'steps' }, t.steps.join('\n')),
    t.assumptions?.length > 0 && el('p', {}, 'Assumes: ', t.assumptions.join('; '), '.'),
    t.notes?.length > 0 && el('ul', { class: 'notes' }, t.notes.map((n) => el('li', {}, n))),
    t.alternatives?.length > 0 && [el('h3', {}, 'Beside it'), altTable(t.alternatives)],
  ];
}

function altTable(alternatives) {
  const num = (v) => (v === null || v === undefined ? '' : Number(Number(v).toPrecision(4)));
  return el('table', { class: 'alt' }, el('thead', {}, el('tr', {}, ['by', 'mean', 'SD', 'note'].map((h) => el('th', { scope: 'col' }, h)))),
    el('tbody', {}, alternatives.map((a) => el('tr', { class: a.struck ? 'struck' : '' },
      el('td', {}, a.name), el('td', {}, num(a.mean)), el('td', {}, num(a.sd)), el('td', {}, a.struck ? 'impossible: ' : '', a.note ?? '')))));
}

export function flagsView(w, meanings) {
  if (!w.flags?.length) return null;
  return [el('h3', {}, 'To look at'), el('ul', { class: 'flags' }, w.flags.map((f) => el('li', {},
    meanings[f.name]?.meaning ?? f.name, f.detail ? ` (${f.detail})` : '', meanings[f.name]?.todo && el('span', { class: 'todo' }, ` ${meanings[f.name].todo}`))))];
}
