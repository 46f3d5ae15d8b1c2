// Two checkers' decisions on one result, side by side, to be settled by a
// person who says which holds and why.
import { el } from './dom.js';
import { FIELDS, printed } from './words.js';

export function settleView(cell, settle) {
  const sides = cell.sides ?? [];
  const differs = (f) => new Set(sides.map((s) => String(s.record?.[f] ?? ''))).size > 1;
  const why = el('textarea', { rows: 2, id: 'settle-why', 'aria-label': 'Why' });
  const take = (s) => () => (why.value.trim() ? settle({ take: s.checker, why: why.value.trim() }) : why.focus());
  return [
    el('div', { class: 'two' }, sides.map((s) => el('section', { 'aria-label': `Decision of ${s.checker}` },
      el('h3', {}, `${s.checker}: ${s.decision}`), s.record && el('p', {}, printed(s.record)),
      el('dl', { class: 'fields' }, FIELDS.filter(([f]) => s.record?.[f] !== null && s.record?.[f] !== undefined).map(([f, label]) => [
        el('dt', {}, label), el('dd', { class: differs(f) ? 'differs' : '' }, String(s.record[f]), differs(f) ? ' (differs)' : '')])),
      s.reason && el('p', {}, `Reason: ${s.reason}`), s.note && el('p', {}, s.note)))),
    cell.settled && el('p', {}, `Settled by ${cell.settled.checker}: ${cell.settled.take} holds. ${cell.settled.why}`),
    el('h3', {}, 'Which holds, and why?'), why,
    el('div', { class: 'choices' }, sides.map((s) => el('button', { type: 'button', onclick: take(s) }, `${s.checker} holds`)),
      el('button', { type: 'button', onclick: () => (why.value.trim() ? settle({ take: 'neither', why: why.value.trim() }) : why.focus()) }, 'Neither: drop it')),
  ];
}
