// The passage or the table as read, for papers without pages.
import { el } from './dom.js';
import { OWN, TAGS } from './words.js';

export function passageView(p) {
  return el('article', { class: 'passage' }, p.heading && el('h2', {}, p.heading),
    p.blocks.map((block) => (block.rows ? table(block) : el('p', { class: block.note ? 'note' : '' }, spans(block.spans)))));
}

function spans(list) {
  return (list ?? []).map((s) => {
    if (!s.field) return s.text;
    if (OWN.has(s.field)) return el('mark', { 'data-text': s.text }, s.text);
    return el('mark', { class: 'src', 'data-text': s.text }, s.text, el('span', { class: 'tag' }, TAGS[s.field] ?? s.field));
  });
}

function table(block) {
  return el('table', {}, el('caption', {}, spans(block.spans)), block.rows.map((row) => el('tr', {},
    row.map((c) => el(c.head ? 'th' : 'td', { rowspan: c.rows > 1 ? c.rows : null, colspan: c.cols > 1 ? c.cols : null }, spans(c.spans))))));
}
