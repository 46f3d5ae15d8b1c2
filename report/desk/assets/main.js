// The desk: holds which row and cell are under check, listens to keys, sends
// decisions. The ledger on disk is the only truth; this page can be reloaded or
// opened twice at any moment.
import { get, post, Refused } from './api.js';
import { $, el, replace, say } from './dom.js';
import { Leaf } from './leaf.js';
import { addForm, amendForm, askQuery, askReason, find, showKeys, typeForm, wordAt, wordsIn } from './forms.js';
import { fieldsView, flagsView, many, rowView, workingView } from './row.js';
import { choose, settleView } from './settle.js';
import { printed } from './words.js';

const leaf = new Leaf();
const state = { rows: [], order: [], at: 0, row: null, cell: 0, aside: false, form: null, field: null, flags: {}, version: '', mode: document.body.dataset.mode, shownAt: 0, typed: new Map() };

// GLANCE is the least time, in ms, that a result is in view before a key may
// confirm it: a key pressed sooner was aimed at what stood there before.
const GLANCE = 300;
const looked = () => state.shownAt !== null && performance.now() - state.shownAt >= GLANCE;

const visible = () => state.rows.filter((r) => state.aside || !r.aside);
const cellNow = () => state.row?.cells[state.cell];
const hidden = (cell) => state.mode === 'type-first' && cell.type_first && !state.typed.has(cell.working.record.id);

// list reads the rows anew. Of several answers under way the last one counts.
let asked = 0, answered = 0;
async function list() {
  const turn = ++asked;
  try {
    const data = await get('rows');
    if (turn !== asked) return;
    state.rows = data.rows;
    state.version = data.version;
    state.flags = data.flags;
    const at = visible().findIndex((r) => r.key === state.row?.key);
    if (at >= 0) state.at = at;
    const c = data.counts;
    $('progress').textContent = `${c.decided} of ${c.all} decided · ${c.doubtful} doubtful open`;
    $('aside-count').textContent = String(c.aside);
  } finally {
    answered = Math.max(answered, turn);
  }
}

async function load(keep) {
  await list();
  const rows = visible();
  const want = keep ?? decodeURIComponent(location.hash.slice(1)).split('|')[0];
  const found = rows.findIndex((r) => r.key === want);
  const open = rows.findIndex((r) => r.cells.some((x) => x.state === 'open'));
  await show(found >= 0 ? found : Math.max(open, 0), found >= 0 && !keep ? decodeURIComponent(location.hash.slice(1)).split('|')[1] : cellNow()?.working.record.id);
}

async function show(at, id) {
  const rows = visible();
  if (!rows.length) { replace($('row'), el('h2', {}, 'Nothing to check here'), el('p', {}, 'No result fits. Show what is set aside with s, or start the desk without filters.')); replace($('cell')); return; }
  if (at < 0 || at >= rows.length) { say(at < 0 ? 'This is the first row.' : 'This is the last row.'); return; }
  const listed = rows[at];
  take(at, await get('row', { key: listed.key }), id);
}

function take(at, row, id) {
  state.at = at;
  state.row = row;
  const byID = row.cells.findIndex((c) => c.working.record.id === id);
  const firstOpen = row.cells.findIndex((c) => c.state === 'open');
  state.cell = byID >= 0 ? byID : Math.max(firstOpen, 0);
  state.form = null;
  draw();
}

function draw() {
  const cell = cellNow(), r = cell.working.record;
  history.replaceState(null, '', `#${encodeURIComponent(`${state.row.key}|${r.id}`)}`);
  $('where').textContent = `${state.row.paper_name} — row ${state.at + 1} of ${visible().length}`;
  leaf.tour = null;
  replace($('row'), rowView(state.row, state.cell, (i) => { state.cell = i; state.form = null; draw(); }, state.mode === 'type-first' && state.row.cells.some(hidden), flags()));
  drawCell();
  showCard();
  state.shownAt = null;
  $('choices').setAttribute('aria-busy', 'true');
  leaf.show(state.row.paper, cell.working, state.row.cells.filter((c) => c !== cell).map((c) => c.working), { blind: hidden(cell) }).catch((e) => { leaf.none(e.message); leaf.onseen(); fail(e); });
  const ahead = visible().slice(state.at + 1, state.at + 4).filter((row) => row.page && (row.page !== state.row.page || row.paper !== state.row.paper));
  for (const key of new Set(ahead.map((row) => `${row.paper} ${row.page}`))) leaf.prepare(...key.split(' '));
}

// flags lists what to look at in the cells that a key may confirm now.
function flags() {
  if (state.mode === 'settle' || hidden(cellNow())) return null;
  return flagsView(state.row.cells.filter((c) => c === cellNow() || isOpen(c)), cellNow(), state.flags);
}

// showCard scrolls to the cell under check, with those after it below; the first
// is shown with what the row shares.
function showCard() {
  const under = $('under'), cards = [...$('row').querySelectorAll('.cells button')];
  under.scrollTop = 0;
  const bottom = under.getBoundingClientRect().bottom;
  if (state.cell > 0 && cards.slice(state.cell).some((c) => c.getBoundingClientRect().bottom > bottom)) cards[state.cell]?.scrollIntoView({ block: 'start' });
}

function drawCell() {
  const cell = cellNow();
  state.field = null;
  leaf.onarea = null;
  replace($('choices'));
  $('view').classList.toggle('pick', state.form === 'amend' || hidden(cell));
  if (state.mode === 'settle') { replace($('cell'), settleView(cell, (choice) => after(() => settle(cell, choice)))); return; }
  if (hidden(cell)) { replace($('cell'), typeForm(cell, (values) => after(() => compare(cell, values)), (input) => { state.field = input; })); $('cell').querySelector('input')?.focus(); return; }
  if (state.form === 'amend') {
    const key = `draft:${cell.working.record.id}`;
    const draft = { fields: state.typed.get(cell.working.record.id)?.fields ?? {}, ...JSON.parse(sessionStorage.getItem(key) ?? '{}'), keep: (d) => sessionStorage.setItem(key, JSON.stringify(d)) };
    replace($('cell'), amendForm(cell, draft, { onsave: (d) => after(() => amend(cell, d, key)), onleave: () => { state.form = null; sessionStorage.removeItem(key); drawCell(); $('side').focus(); }, onfocus: (i) => { state.field = i; } }));
    $('cell').querySelector('input')?.focus();
    return;
  }
  const typed = state.typed.get(cell.working.record.id);
  const d = cell.decision;
  replace($('cell'),
    typed && el('p', { class: typed.same ? '' : 'differs' }, typed.same ? 'You typed the same.' : `You typed otherwise: ${typed.text}`),
    !many(state.row) && flags(),
    el('h3', {}, 'As read'), fieldsView(cell, state.row),
    workingView(cell.working),
    d && el('p', {}, `${d.decision} by ${d.checker}, ${d.decided_at}${d.reason ? `: ${d.reason}` : ''}${d.note ? ` (${d.note})` : ''}`));
  drawChoices();
}

// drawChoices says what each key does now: how many cells Enter would confirm.
function drawChoices() {
  if (state.mode === 'settle' || state.form || hidden(cellNow())) return;
  const go = toConfirm().length;
  const choices = [go > 0 && ['Enter', go > 1 ? `Confirm ${go} cells` : 'Confirm', 'confirm-row'], go > 1 && ['c', 'Only this', 'confirm'], ['a', 'Amend', 'amend'], ['x', 'Drop', 'drop'], state.row.cells.filter(isOpen).length > 1 && ['X', 'Drop row', 'drop-row'], ['q', 'Query', 'query'], ['u', 'Undo', 'undo']];
  replace($('choices'), choices.filter(Boolean).map(([k, label, what]) => el('button', { type: 'button', 'data-do': what }, label, ' ', el('kbd', {}, k))));
}

function fail(error) {
  say(error.message, true);
  if (!(error instanceof Refused)) throw error;
}

const isOpen = (cell) => cell.state === 'open';

// advance goes on after a decision: to the next open cell of the row, else to the
// next row that has one. The list is read again when that is shown.
async function advance(decided, newState) {
  const ids = new Set(decided.map((c) => c.working.record.id));
  for (const r of state.rows) for (const c of r.cells) if (ids.has(c.id)) c.state = newState;
  const rows = visible();
  let at = -1;
  for (let k = 0; k < rows.length && at < 0; k++) {
    const i = (state.at + k) % rows.length;
    if (rows[i].cells.some(isOpen)) at = i;
  }
  const stay = at < 0;
  if (stay) at = state.at;
  take(at, await get('row', { key: rows[at].key }), stay ? decided[0].working.record.id : undefined);
  if (stay) say('That was the last open row.');
  list().catch(fail);
}

async function decide(cells, decision, more = {}) {
  const seen = Math.round((performance.now() - (state.shownAt ?? performance.now())) / cells.length);
  const drafts = cells.map((cell) => {
    const { id } = cell.working.record;
    return { id, hash: cell.hash, decision, mode: state.typed.has(id) ? 'typed first' : 'shown', seen_ms: seen, ...more };
  });
  try {
    await post('decide', { drafts });
  } catch (e) {
    say(e.message, true);
    await load(state.row.key);
    return false;
  }
  say(`${decision}: ${cells.length > 4 ? `${cells.length} cells` : cells.map((c) => printed({ ...c.working.record, ...more.amended })).join('; ')}`);
  await advance(cells, decision);
  return true;
}

// cardsInView are the cells of the row whose cards can be seen whole right now.
function cardsInView() {
  const side = $('under').getBoundingClientRect();
  return state.row.cells.filter((c) => {
    const card = $('row').querySelector(`[data-id="${c.working.record.id}"]`)?.getBoundingClientRect();
    return card && card.top >= side.top - 1 && card.bottom <= side.bottom + 1;
  });
}

// onScreen are those of them whose numbers on the page can be seen too.
const onScreen = () => cardsInView().filter((c) => leaf.sees(c.working));

// toConfirm are the open cells that Enter confirms: those on the screen, but a
// doubtful one only when it is stepped into.
function toConfirm(held = []) {
  return onScreen().filter((c) => {
    if (!isOpen(c) || hidden(c)) return false;
    const skip = c.working.record.reading === 'doubtful' && c !== cellNow();
    if (skip) held.push(c);
    return !skip;
  });
}

leaf.onseen = () => {
  state.shownAt ??= performance.now();
  drawChoices(); // how many cells are in view is known only now
  setTimeout(() => { if (looked()) $('choices').setAttribute('aria-busy', 'false'); }, GLANCE + 1);
};

const TOO_SOON = 'Not confirmed: this has only just appeared. Look at it, then press again.';

const OUT_OF_VIEW = 'Not confirmed: its numbers on the page or its card are out of view.';

const act = {
  'confirm-row': () => {
    if (!looked()) { say(TOO_SOON); return; }
    const held = [], go = toConfirm(held);
    if (!go.length) { say(cellNow().state === 'open' ? OUT_OF_VIEW : 'This row is decided: go on with ↓, to the next open one with o, or take it back with u.'); return; }
    return decide(go, 'confirmed').then((done) => { if (done && held.length) say(`${go.length} confirmed. ${held.length} doubtful left: each is decided by itself.`); });
  },
  confirm: () => {
    if (!looked()) { say(TOO_SOON); return; }
    if (!isOpen(cellNow())) { say('This cell is decided already: take it back with u first.'); return; }
    if (!onScreen().includes(cellNow())) { say(OUT_OF_VIEW); return; }
    return decide([cellNow()], 'confirmed');
  },
  amend: () => { state.form = 'amend'; drawCell(); },
  drop: async () => { const a = await askReason('Drop this cell: why?'); if (a) await decide([cellNow()], 'dropped', a); },
  'drop-row': async () => {
    const cells = cardsInView().filter(isOpen);
    if (!cells.length) { say('No open cell of this row is in view.'); return; }
    const a = await askReason(cells.length > 1 ? `Drop these ${cells.length} cells: why?` : 'Drop this cell: why?');
    if (a) await decide(cells, 'dropped', a);
  },
  query: async () => { const note = await askQuery(); if (note) await decide([cellNow()], 'queried', { note }); },
  undo: async () => { const { id, decision, taken } = await post('undo'); await load(); say(id ? `Taken back: ${decision}${taken > 1 ? `, ${taken} cells` : ''}.` : 'There is nothing to take back.'); if (id) jump(id); },
  find: async () => { const key = await find(state.rows); if (key) { const i = indexOf(key); await show(i); } },
  aside: async () => { state.aside = !state.aside; document.querySelector('[data-do=aside]').setAttribute('aria-pressed', String(state.aside)); await load(state.row?.key); say(state.aside ? 'What was set aside (baseline rows, results quoted from other studies) is shown.' : 'Baseline rows and quoted results are set aside.'); },
  star: async () => { await post('star', { outcome: cellNow().working.record.outcome ?? '' }); await load(state.row.key); },
  keys: showKeys,
  add: addByHand,
  close: async () => { await post('close'); document.body.replaceChildren(el('main', { class: 'passage' }, el('h2', {}, 'The desk is closed'), el('p', {}, 'Every decision is in the ledger. This page can be closed.'))); },
  'zoom-in': () => leaf.magnify(1.25), 'zoom-out': () => leaf.magnify(0.8), 'zoom-fit': () => leaf.magnify(0), turn: () => leaf.turn(), elsewhere: () => leaf.elsewhere(),
  next: () => show(state.at + 1), before: () => show(state.at - 1),
  right: () => step(1), left: () => step(-1),
  doubtful: () => next((r) => r.cells.some((c) => c.state === 'open' && c.reading === 'doubtful'), 'No doubtful result is open.'),
  open: () => next((r) => r.cells.some((c) => c.state === 'open'), 'No result is open.'),
  down: () => $('under').scrollBy(0, 0.8 * $('under').clientHeight), up: () => $('under').scrollBy(0, -0.8 * $('under').clientHeight),
  page: () => (document.activeElement === $('view') ? $('side') : $('view')).focus(),
};

function indexOf(key) {
  if (!visible().some((r) => r.key === key)) state.aside = true;
  return visible().findIndex((r) => r.key === key);
}

function jump(id) {
  const row = state.rows.find((r) => r.cells.some((c) => c.id === id));
  if (row) return show(indexOf(row.key), id);
}

function next(fits, none) {
  const rows = visible();
  for (let k = 1; k <= rows.length; k++) {
    const i = (state.at + k) % rows.length;
    if (fits(rows[i])) return show(i).then(() => true);
  }
  say(none);
}

function step(by) {
  const i = state.cell + by;
  if (i < 0 || i >= state.row.cells.length) return;
  state.cell = i;
  state.form = null;
  draw();
}

async function amend(cell, d, key) {
  if (!Object.keys(d.amended).length && !d.take) { say('Nothing is changed yet.'); return; }
  if (d.reason === 'other' && !d.note.trim()) { say('"Other" needs a note.', true); return; }
  if (await decide([cell], 'amended', d)) sessionStorage.removeItem(key);
}

async function compare(cell, values) {
  const r = cell.working.record;
  const { same, differs } = await post('compare', { id: r.id, typed: values });
  state.typed.set(r.id, { same, fields: Object.fromEntries(differs.filter((d) => d.typed).map((d) => [d.field, d.typed])), text: differs.map((d) => `${d.field}: you ${d.typed || 'nothing'}, the program ${d.read || 'nothing'}`).join('; ') });
  draw();
  say(same ? 'The same as the program read.' : 'Not the same: look at the page again. a amends with what you typed.', !same);
}

async function settle(cell, choice) {
  await post('settle', { id: cell.working.record.id, hash: cell.hash, ...choice });
  await list();
  if (!(await next((r) => r.cells.some(isOpen), 'That was the last to settle.'))) await load(state.row.key);
}

async function addByHand() {
  const paper = state.row?.paper;
  if (!paper) return;
  const page = leaf.shown?.page ?? '';
  const open = async (place) => {
    const answer = await addForm({ page, ...place });
    say('');
    if (!answer) return;
    const { id } = await post('add', { paper, ...answer });
    await load();
    await jump(id);
    say('Added by you, and worked through like the others.');
  };
  if (!page) { await open({}); return; }
  say('Draw a box round the result on the page, or press Enter to type it. Esc leaves.');
  leaf.onarea = async (a, b) => { leaf.onarea = null; try { await open(await wordsIn(paper, page, a, b)); } catch (e) { fail(e); } };
  $('view').focus();
  state.form = 'area';
  act.type = () => { leaf.onarea = null; state.form = null; return open({}); };
}

leaf.onpick = async (event) => {
  const field = state.field;
  if (!field) return;
  let text = event.target.closest?.('[data-text]')?.dataset.text ?? '';
  if (leaf.shown?.page) text = await wordAt(leaf.shown.paper, leaf.shown.page, leaf.point(event)).catch(() => '');
  else if (!text) text = String(getSelection());
  const number = /[-−–]?\d[\d,.·]*\d|[-−–]?\d/.exec(text.replace(/[()[\]]/g, ''));
  if (!number) { say('No number there.'); return; }
  field.value = number[0].replace(/[−–]/g, '-').replace('·', '.');
  field.dispatchEvent(new Event('input'));
  field.focus();
};

const BY_KEY = { ArrowDown: 'next', j: 'next', ArrowUp: 'before', k: 'before', ArrowRight: 'right', ArrowLeft: 'left', Enter: 'confirm-row', c: 'confirm', a: 'amend', x: 'drop', X: 'drop-row', q: 'query', u: 'undo', d: 'doubtful', o: 'open', '/': 'find', s: 'aside', w: 'star', m: 'add', '+': 'zoom-in', '=': 'zoom-in', '-': 'zoom-out', 0: 'zoom-fit', p: 'page', PageDown: 'down', PageUp: 'up', v: 'elsewhere', t: 'turn', '?': 'keys' };

// One thing is done at a time. A decision that comes while another thing is
// still being done was aimed at what stood there before: it is not taken.
const DECISIONS = new Set(['confirm-row', 'confirm', 'amend', 'drop', 'drop-row', 'query', 'undo']);
let busy = 0, last = Promise.resolve();
function after(work) {
  busy++;
  last = last.then(work).catch(fail).finally(() => { busy--; });
  return last;
}
function run(name) {
  if (state.mode === 'settle' && DECISIONS.has(name) && name !== 'undo') { say('Press 1 or 2 for the one that holds, 3 for neither.'); return; }
  if (busy && DECISIONS.has(name)) { say('Not taken: the desk was still busy with the last key. Look, then press again.'); return; }
  after(() => act[name]?.());
}

addEventListener('keydown', (e) => {
  if (e.ctrlKey || e.metaKey || e.altKey || $('dialog').open) return;
  const typing = e.target.matches?.('input, select, textarea');
  if (typing) return;
  if (state.form === 'area') {
    if (e.key === 'Enter') { e.preventDefault(); run('type'); return; }
    if (e.key === 'Escape') { leaf.onarea = null; state.form = null; say(''); return; }
  }
  if (e.target === $('view') && e.key.startsWith('Arrow')) return;
  if (e.key === 'Enter' && e.target.matches?.('button:not(.cells button), a')) return;
  if (state.mode === 'settle' && '123'.includes(e.key)) { e.preventDefault(); choose(e.key); return; }
  const name = BY_KEY[e.key];
  if (!name) return;
  e.preventDefault();
  if (e.repeat && DECISIONS.has(name)) return; // a key held down decides once
  run(name);
});
document.addEventListener('click', (e) => { const name = e.target.closest?.('[data-do]')?.dataset.do; if (name) run(name); });

// A decision taken elsewhere (another tab, the terminal) shows up here. While
// something is being done here it waits: what changed may be that.
const quiet = () => !busy && asked === answered && !document.hidden && !state.form && !$('dialog').open && !document.activeElement?.matches('input, textarea, select');
setInterval(async () => {
  if (!quiet()) return;
  const { version } = await get('version').catch(() => ({}));
  if (version && version !== state.version && quiet()) after(() => load(state.row?.key));
}, 1500);
addEventListener('resize', () => { showCard(); leaf.again()?.catch(fail); if (state.row && !state.form) drawChoices(); });
for (const id of ['under', 'view']) $(id).addEventListener('scroll', () => { if (state.row && state.shownAt) drawChoices(); });

load().catch(fail);
