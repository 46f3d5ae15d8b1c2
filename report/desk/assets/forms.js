// The forms of the desk: amend, drop, query, add by hand, find, keys.
import { get, post } from './api.js';
import { ask, el, replace } from './dom.js';
import { CHOICES, FIELDS, KEYS, REASONS, SHORT, SOURCES, spread } from './words.js';
import { workingView } from './row.js';

function control(field, value, oninput) {
  const props = { name: field, id: `f-${field}`, autocomplete: 'off' };
  const node = CHOICES[field]
    ? el('select', props, CHOICES[field].map((c) => el('option', { value: c, selected: c === (value ?? '') }, SHORT[c] ?? (c || 'not said'))))
    : el('input', { ...props, value: value ?? '', inputmode: ['arm', 'arm2', 'time', 'subgroup', 'outcome', 'unit'].includes(field) ? 'text' : 'decimal' });
  node.addEventListener('input', oninput);
  node.addEventListener('focus', () => node.select?.()); // what is typed takes the place of what was read
  return node;
}

// amendForm edits the fields of one cell; every change is worked through by the
// program at once. draft survives a reload of the page.
export function amendForm(cell, draft, { onsave, onleave, onfocus }) {
  const r = cell.working.record;
  const start = Object.fromEntries(FIELDS.map(([f]) => [f, r[f] === null || r[f] === undefined ? '' : String(r[f])]));
  const now = { ...start, ...draft.fields };
  const result = el('div'), summary = el('p', { role: 'status', class: 'summary' });
  let turn = 0, timer = 0;
  const changed = () => Object.fromEntries(Object.entries(now).filter(([f, v]) => v !== start[f]));
  const work = async () => {
    const mine = ++turn;
    try {
      const { working } = await post('work', { id: r.id, amended: changed() });
      if (mine !== turn) return;
      const was = spread(r), is = spread(working.record);
      replace(summary, was === is ? is : [was, ' → ', el('b', {}, is)]);
      replace(result, workingView(working));
    } catch (e) {
      if (mine === turn) replace(summary, el('b', {}, e.message));
    }
  };
  const labels = new Map();
  const note = el('input', { name: 'note', id: 'f-note', autocomplete: 'off', value: draft.note ?? '' });
  const reason = el('select', { name: 'reason', id: 'f-reason' }, REASONS.map((x) => el('option', { value: x, selected: x === (draft.reason ?? 'misread') }, x)));
  const keep = () => draft.keep({ fields: changed(), note: note.value, reason: reason.value });
  const rows = FIELDS.map(([f, label]) => {
    const input = control(f, now[f], () => {
      now[f] = input.value.trim();
      labels.get(f).className = now[f] !== start[f] ? 'changed' : '';
      keep();
      clearTimeout(timer);
      timer = setTimeout(work, 120);
    });
    input.addEventListener('focus', () => onfocus(input));
    const l = el('label', { for: `f-${f}`, class: now[f] !== start[f] ? 'changed' : '' }, label);
    labels.set(f, l);
    return [l, input];
  });
  note.addEventListener('input', keep);
  reason.addEventListener('input', keep);
  const alternatives = (cell.working.trail?.alternatives ?? []).filter((a) => !a.struck && a.sd !== undefined && a.sd !== null);
  const take = alternatives.length > 0 && r.sd === null && [el('label', { for: 'f-take' }, 'take a proposal'),
    el('select', { id: 'f-take', name: 'take' }, el('option', { value: '' }, 'none'), alternatives.map((a) => el('option', { value: a.name }, a.name)))];
  const form = el('form', {
    class: 'amend', 'aria-label': 'Amend this cell',
    onsubmit: (e) => { e.preventDefault(); onsave({ amended: changed(), reason: reason.value, note: note.value, take: form.elements.take?.value ?? '' }); },
    onkeydown: (e) => { if (e.key === 'Escape') { e.preventDefault(); onleave(); } },
  }, rows, take, [el('label', { for: 'f-reason' }, 'reason'), reason, el('label', { for: 'f-note' }, 'note'), note],
  el('div', { class: 'wide' }, el('button', { type: 'submit' }, 'Save the amended cell ', el('kbd', {}, 'Enter')), ' ',
    el('button', { type: 'button', onclick: onleave }, 'Leave ', el('kbd', {}, 'Esc'))));
  work();
  return [el('h3', {}, 'Amend. A click on a number of the page puts it into the field in focus.'), summary, form, result];
}

// typeForm asks for what the person sees before anything read is shown.
export function typeForm(cell, onsave, onfocus) {
  const two = ['ci'].includes(cell.working.record.given_as) || cell.working.record.lower !== null;
  const fields = [['estimate', 'estimate'], ...(two ? [['lower', 'lower bound'], ['upper', 'upper bound']] : [['given_value', 'printed spread']]), ['n', 'n (leave empty if not stated)']];
  const form = el('form', { class: 'amend', 'aria-label': 'Type what you see', onsubmit: (e) => { e.preventDefault(); onsave(Object.fromEntries(new FormData(form))); }, onkeydown: (e) => { if (e.key === 'Escape') e.target.blur(); } },
    fields.map(([f, label]) => {
      const input = el('input', { name: f, id: `t-${f}`, autocomplete: 'off', inputmode: 'decimal' });
      input.addEventListener('focus', () => onfocus(input));
      return [el('label', { for: `t-${f}` }, label), input];
    }), el('button', { type: 'submit', class: 'wide' }, 'Compare with what the program read ', el('kbd', {}, 'Enter')));
  return [el('h3', {}, 'Type what you see on the page'), form, el('p', { class: 'notes' }, el('kbd', {}, 'Esc'), ' leaves the fields: then the other keys work, such as ↓ or x.')];
}

export function askReason(title) {
  return ask(title, (finish) => {
    const text = el('input', { 'aria-label': 'in words', placeholder: 'other, in words, then Enter' });
    const pick = (reason) => {
      if (reason === 'other' && !text.value.trim()) { text.focus(); return; }
      finish({ reason, note: text.value.trim() });
    };
    const list = el('div', { class: 'list' }, REASONS.map((r, i) => el('button', { type: 'button', onclick: () => pick(r) }, el('kbd', {}, String(i + 1)), ' ', r)));
    // Words alone are a reason of their own kind.
    text.addEventListener('keydown', (e) => { if (e.key === 'Enter') { e.preventDefault(); pick('other'); } });
    list.addEventListener('keydown', (e) => { if (REASONS[Number(e.key) - 1]) { e.preventDefault(); pick(REASONS[Number(e.key) - 1]); } });
    return [list, text];
  });
}

export function askQuery() {
  return ask('What should be asked about this result?', (finish) => {
    const text = el('textarea', { rows: 3, 'aria-label': 'Question', autofocus: true });
    text.addEventListener('keydown', (e) => { if (e.key === 'Enter' && !e.shiftKey && text.value.trim()) { e.preventDefault(); finish(text.value.trim()); } });
    return [text, el('p', {}, el('button', { type: 'button', onclick: () => text.value.trim() && finish(text.value.trim()) }, 'Keep the question ', el('kbd', {}, 'Enter')))];
  });
}

export function showKeys() {
  return ask('Keys', () => [el('p', {}, el('button', {}, 'Close ', el('kbd', {}, 'Esc'))),
    el('dl', { class: 'keys' }, KEYS.map(([k, what]) => el('div', {}, el('dt', {}, el('kbd', {}, k)), el('dd', {}, what))))], 'broad');
}

export function find(rows) {
  return ask('Find a row', (finish) => {
    const list = el('div', { class: 'list' });
    const input = el('input', { 'aria-label': 'Words or numbers', placeholder: 'outcome, arm, table, number …', autofocus: true });
    const draw = () => {
      const want = input.value.toLowerCase().split(/\s+/).filter(Boolean);
      const hits = rows.filter((r) => want.every((w) => r.find.includes(w))).slice(0, 60);
      replace(list, hits.map((r) => el('button', { type: 'button', onclick: () => finish(r.key) }, `${r.star ? '★ ' : ''}${r.title}`)), hits.length === 0 && el('p', {}, 'No row holds all of that.'));
    };
    input.addEventListener('input', draw);
    input.addEventListener('keydown', (e) => { if (e.key === 'Enter') { e.preventDefault(); list.querySelector('button')?.click(); } });
    const walk = (e) => {
      const by = { ArrowDown: 1, ArrowUp: -1 }[e.key];
      if (!by) return;
      e.preventDefault();
      const stops = [input, ...list.querySelectorAll('button')];
      stops[Math.min(Math.max(stops.indexOf(document.activeElement) + by, 0), stops.length - 1)].focus();
    };
    input.addEventListener('keydown', walk);
    list.addEventListener('keydown', walk);
    draw();
    return [input, list];
  });
}

// addForm takes a result that the program missed: typed as printed, or the
// words of an area drawn on the page.
export function addForm(place) {
  return ask('Add a result by hand', (finish) => {
    const problem = el('p', { role: 'alert' });
    const preview = el('div');
    const input = (name, label, value = '') => el('label', {}, label, el('input', { name, value }));
    const text = el('input', { name: 'text', value: place.text ?? '', placeholder: '12.4 (95% CI 11.8 to 13.0), n = 42', autofocus: true });
    const read = async () => {
      try {
        const { working } = await post('work', { text: text.value });
        replace(preview, workingView(working)); replace(problem);
      } catch (e) { replace(preview); replace(problem, e.message); }
    };
    text.addEventListener('change', read);
    if (text.value) read();
    const form = el('div', {}, el('label', {}, 'as printed', text),
      input('outcome', 'outcome'), input('arm', 'arm'), input('time', 'time'), input('n', 'n', place.n ?? ''), input('page', 'page', place.page ?? ''),
      el('label', {}, 'where it stands', el('select', { name: 'source' }, SOURCES.map((s) => el('option', {}, s)))), input('note', 'note'), preview, problem,
      el('button', { type: 'button', onclick: () => add() }, 'Add it as confirmed by you ', el('kbd', {}, 'Enter')));
    const add = () => {
      const values = Object.fromEntries([...form.querySelectorAll('[name]')].map((i) => [i.name, i.value.trim()]));
      if (!values.text) { text.focus(); return; }
      finish({ ...values, box: place.box ?? null });
    };
    form.addEventListener('keydown', (e) => { if (e.key === 'Enter' && e.target.matches('input')) { e.preventDefault(); add(); } });
    return form;
  });
}

export async function wordsIn(paper, page, [ax, ay], [bx, by]) {
  const { words } = await get('words', { paper, page });
  const x0 = Math.min(ax, bx), x1 = Math.max(ax, bx), y0 = Math.min(ay, by), y1 = Math.max(ay, by);
  const inside = words.filter((w) => { const x = (w.box[0] + w.box[2]) / 2, y = (w.box[1] + w.box[3]) / 2; return x >= x0 && x <= x1 && y >= y0 && y <= y1; });
  return { text: inside.map((w) => w.text).join(' '), box: [x0, y0, x1, y1] };
}

export async function wordAt(paper, page, [x, y]) {
  const { words } = await get('words', { paper, page });
  const near = (w) => Math.max(w.box[0] - x, x - w.box[2], 0) + Math.max(w.box[1] - y, y - w.box[3], 0);
  const best = words.reduce((a, w) => (a && near(a) <= near(w) ? a : w), null);
  return best && near(best) < 6 ? best.text : '';
}
