// Two checkers' decisions on one result, side by side, to be settled by a
// person who says which holds and why.
import { el, say } from './dom.js';
import { FIELDS, inWords, printed } from './words.js';

export function settleView(cell, settle) {
  const sides = cell.sides ?? [];
  const value = (s, f) => (s.record ? inWords(f, s.record) : '');
  const differ = FIELDS.filter(([f]) => new Set(sides.map((s) => value(s, f))).size > 1);
  const alike = FIELDS.filter(([f]) => !differ.some(([g]) => g === f) && value(sides[0], f) !== '');
  const row = (name, texts, cls = '') => el('tr', { class: cls }, el('th', { scope: 'row' }, name), texts.map((t) => el('td', {}, t)));
  const why = el('input', { id: 'settle-why', autocomplete: 'off' });
  const choices = [...sides.map((s) => [s.checker, `${s.checker} holds`]), ['neither', 'neither: drop it']];
  const form = el('form', {
    class: 'settle', 'aria-label': 'Settle',
    onkeydown: (e) => { if (e.key === 'Escape') e.target.blur(); },
    onsubmit: (e) => {
      e.preventDefault();
      const take = new FormData(form).get('take');
      if (!take) { say('Which holds? Press 1, 2 or 3 outside the field.', true); return; }
      if (!why.value.trim()) { say('Say why: it is kept with what you settle.', true); why.focus(); return; }
      settle({ take, why: why.value.trim() });
    },
  }, choices.map(([take, label], i) => el('label', {}, el('input', { type: 'radio', name: 'take', value: take, id: `settle-${i + 1}` }), el('kbd', {}, String(i + 1)), ' ', label)),
  el('label', { for: 'settle-why', class: 'why' }, 'because'), why, el('button', { type: 'submit' }, 'Settle ', el('kbd', {}, 'Enter')));
  return [
    el('table', { class: 'alt two' }, el('thead', {}, row('', sides.map((s) => s.checker))), el('tbody', {},
      row('decided', sides.map((s) => [s.decision, s.reason && `: ${s.reason}`])), row('result', sides.map((s) => s.record && printed(s.record))),
      sides.some((s) => s.note) && row('note', sides.map((s) => s.note)),
      differ.map(([f, label]) => row(label, sides.map((s) => value(s, f) || 'nothing'), 'differs')))),
    alike.length > 0 && el('p', { class: 'notes' }, 'Alike: ', alike.map(([f, label]) => `${label} ${value(sides[0], f)}`).join(', '), '.'),
    cell.decision && el('p', {}, `Settled by ${cell.decision.checker}: ${cell.decision.decision}. ${cell.decision.note}`),
    el('h3', {}, 'Which holds, and why?'), form,
  ];
}

// choose marks the nth choice and goes on to the reason.
export function choose(n) {
  const choice = document.getElementById(`settle-${n}`);
  if (!choice) return;
  choice.checked = true;
  document.getElementById('settle-why').focus();
}
