// Draws the row under check: what its cells share, the cells, and the cell in
// focus with its fields, its working and its flags.
import { el } from './dom.js';
import { FIELDS, OWN, STATES, inWords, minus, printed, spread, who } from './words.js';

// What may hold for all cells of a row, and so is looked at once.
const SHARED = ['statistic', 'given_as', 'level', 'n', 'n2', 'unit', 'time', 'subgroup', 'adjusted'];
// MANY cells of one row stand below one another; what to look at then stands
// before them, where it is seen first.
const MANY = 6;
export const many = (row) => row.cells.length > MANY;
const CONTEXT = FIELDS.filter(([f]) => !OWN.has(f));

const source = (w, field) => (w.record.places ?? []).find((p) => p.field === field);

// fromWords says where a field was read, as far as the value does not say it.
export function fromWords(w, field, value) {
  const p = source(w, field);
  if (!p) return '';
  const elsewhere = p.page && p.page !== w.record.page ? `page ${p.page}` : '';
  const same = (s) => s.toLowerCase().replace(/\W/g, '');
  const text = p.text && same(p.text) !== same(value) ? `“${p.text.slice(0, 80)}”` : '';
  return [p.from, elsewhere, text].filter(Boolean).join(', ');
}

function facts(list) {
  return el('dl', { class: 'fields' }, list.map(([label, value, from]) => el('div', {}, el('dt', {}, label), el('dd', {}, value, ' ', el('span', { class: 'from' }, from)))));
}

// shared names the fields that hold for every cell of the row.
export function shared(cells) {
  if (cells.length < 2) return [];
  return SHARED.filter((f) => new Set(cells.map((c) => inWords(f, c.working.record))).size === 1);
}

export function rowView(row, current, choose, hidden, flags) {
  const where = [row.paper_name, row.page && `page ${row.page}`, row.table ?? row.section].filter(Boolean).join(' · ');
  const first = row.cells[0].working, common = shared(row.cells), all = common.filter((f) => inWords(f, first.record) !== '' || f === 'n');
  const outcome = outcomesOf(row.cells);
  const when = ['subgroup', 'time'].filter((f) => common.includes(f) && first.record[f] && !outcome.includes(first.record[f])).map((f) => first.record[f]);
  return [
    el('p', { class: 'where' }, where),
    el('h2', {}, row.star ? '★ ' : '', [outcome, ...when].join(' · ')),
    all.length > 0 && !hidden && [el('h3', {}, 'Holds for all cells'), facts(all.map((f) => {
      const value = inWords(f, first.record) || 'not stated';
      const from = new Set(row.cells.map((c) => fromWords(c.working, f, value)));
      return [FIELDS.find(([g]) => g === f)[1], value, from.size === 1 ? [...from][0] : ''];
    }))],
    many(row) && flags,
    el('ol', { class: many(row) ? 'cells many' : 'cells', 'aria-label': 'Cells of this row' }, row.cells.map((cell, i) => el('li', {}, cellCard(cell, i === current, () => choose(i), hidden, nameOf(cell, row.cells))))),
  ];
}

// outcomesOf names what a row is about: what its cells' outcomes begin with, where
// its columns are outcomes.
function outcomesOf(cells) {
  const all = cells.map((c) => c.working.record.outcome ?? '');
  if (!all[0] && cells.length === 1) return cells[0].working.record.heading ?? 'Result in the text';
  const words = all.map((o) => o.split(' '));
  let n = 0;
  while (n < words[0].length && words.every((w) => w[n] === words[0][n])) n++;
  return words[0].slice(0, n).join(' ').replace(/[\s,;:·–-]+$/, '') || (new Set(all).size > 1 ? 'Several outcomes' : 'Outcome not read');
}

// nameOf tells a cell from the others of its row.
function nameOf(cell, cells) {
  const r = cell.working.record, name = who(r);
  if (!r.outcome || cells.every((c) => c.working.record.outcome === r.outcome)) return name;
  const common = outcomesOf(cells);
  const own = r.outcome.startsWith(common) ? r.outcome.slice(common.length).replace(/^[\s,;:·–-]+/, '') : r.outcome;
  return [own, name].filter(Boolean).join(' · ');
}

function cellCard(cell, current, choose, hidden, name) {
  const r = cell.working.record;
  const veil = hidden && cell.state === 'open';
  const more = [r.use !== 'printed' && spread(r), r.n && `n ${r.n}${r.n2 ? ` and ${r.n2}` : ''}`].filter(Boolean).join(', ');
  return el('button', { type: 'button', 'data-id': r.id, 'aria-current': current ? 'true' : 'false', onclick: choose },
    el('span', { class: 'who' }, name),
    el('span', { class: 'print' }, veil ? 'see the page' : [printed(r), r.unit && r.unit !== '%' && el('span', { class: 'unit' }, ` ${r.unit}`)]),
    el('span', { class: 'sd' }, veil ? '' : more),
    el('span', { class: 'state' }, el('b', {}, STATES[cell.state] ?? cell.state), ` · reading ${r.reading}`));
}

// fieldsView shows what was read beside the numbers, but for what is said of the
// whole row; numbers only where a person amended them.
export function fieldsView(cell, row) {
  const r = cell.working.record, said = new Set(shared(row.cells));
  const list = FIELDS.filter(([f]) => (CONTEXT.some(([g]) => g === f) && !said.has(f)) || cell.changed?.includes(f));
  return facts(list.map(([f, label]) => [label, inWords(f, r), cell.changed?.includes(f) ? 'amended by hand' : fromWords(cell.working, f, inWords(f, r))]).filter(([, v]) => v !== ''));
}

export function workingView(w) {
  const t = w.trail ?? {}, r = w.record;
  return [
    el('h3', {}, 'Working'),
    el('p', {}, r.use === 'withheld' ? `SD withheld: ${r.reason}` : `${spread(r)}${r.sd_of ? ` of ${r.sd_of}` : ''}${r.use === 'printed' ? ', as printed' : ''}`),
    t.steps?.length > 0 && el('pre', { class: 'steps' }, t.steps.join('\n')),
    t.assumptions?.length > 0 && el('p', {}, 'Assumes: ', t.assumptions.join('; '), '.'),
    notes(w).length > 0 && el('ul', { class: 'notes' }, notes(w).map((n) => el('li', {}, n))),
    t.alternatives?.length > 0 && [el('h3', {}, 'Beside it'), altTable(t.alternatives)],
  ];
}

function altTable(alternatives) {
  const num = (v) => (v === null || v === undefined ? '' : Number(Number(v).toPrecision(4)));
  return el('table', { class: 'alt' }, el('thead', {}, el('tr', {}, ['by', 'mean', 'SD', 'note'].map((h) => el('th', { scope: 'col' }, h)))),
    el('tbody', {}, alternatives.map((a) => el('tr', { class: a.struck ? 'struck' : '' },
      el('td', {}, a.name), el('td', {}, num(a.mean)), el('td', {}, num(a.sd)), el('td', {}, a.struck ? 'impossible: ' : '', a.note ?? '')))));
}

// notes are those of the trail that the page does not show: where each field was
// read is outlined there.
function notes(w) {
  const read = (w.record.places ?? []).map((p) => `${p.field.replaceAll('_', ' ')} read as `);
  return (w.trail?.notes ?? []).filter((n) => !read.some((r) => n.startsWith(r)));
}

// flagsView lists what to look at in the whole row, since one key confirms it:
// each flag once, with the cells that have it where not all do, and with the
// particulars of the current one.
export function flagsView(cells, current, meanings) {
  const flags = new Map();
  for (const cell of cells) for (const f of cell.working.flags ?? []) {
    if (!flags.has(f.name)) flags.set(f.name, []);
    flags.get(f.name).push({ cell, detail: f.detail ?? '' });
  }
  if (!flags.size) return null;
  return [el('h3', {}, 'To look at'), el('ul', { class: 'flags' }, [...flags].map(([name, raised]) => {
    const { meaning, todo } = meanings[name] ?? { meaning: name };
    const said = whose(raised.map((f) => ({ ...f, detail: particular(meaning, f.detail) })), cells.length, current);
    return el('li', {}, meaning, said && ` (${said})`, todo && el('span', { class: 'todo' }, ` → ${todo}`));
  }))];
}

// whose says which of all cells a flag concerns, by their estimates, and its
// particulars: all where there are few, else those of the current cell.
function whose(raised, all, current) {
  const name = (f) => minus(f.cell.working.record.estimate);
  const details = new Set(raised.map((f) => f.detail));
  if (details.size === 1) return [raised.length < all && raised.map(name).join('; '), [...details][0]].filter(Boolean).join(': ');
  const full = (f) => [name(f), f.detail].filter(Boolean).join(': ');
  if (raised.length <= 2) return raised.map(full).join('; ');
  const here = raised.find((f) => f.cell === current) ?? raised[0];
  return `${full(here)}; also ${raised.filter((f) => f !== here).map(name).join('; ')}`;
}

// particular is what a flag's detail adds to its meaning: nothing where it says
// the same in other words.
function particular(meaning, detail) {
  const words = (s) => s.toLowerCase().match(/[\p{L}\d.]{3,}/gu) ?? [];
  const said = new Set(words(meaning)), own = words(detail ?? '');
  return own.filter((w) => !said.has(w)).length > 0.5 * own.length ? detail : '';
}
