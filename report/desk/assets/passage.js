// The passage or the table as read, for papers without pages.
import { el } from './dom.js';
import { OWN, TAGS } from './words.js';

export function passageView(p, blind) {
  if (blind) for (const s of p.blocks.flatMap((b) => [b.spans, ...(b.rows ?? []).flat().map((c) => c.spans)]).flat()) if (s && !OWN.has(s.field)) delete s.field;
  return el('article', { class: 'passage' }, p.heading && el('h2', {}, p.heading),
    p.blocks.map((block) => (block.rows ? table(block) : el(block.head ? 'h3' : 'p', { class: block.note ? 'note' : '' }, spans(block.spans)))));
}

// JOIN is how many characters the numbers of a result stand apart at most to be
// framed as one: "4.2 min (95% CI −6.0 to −2.4)".
const JOIN = 60;

function spans(list) {
  list ??= []; // a block without text
  for (const [is, cls] of [[(s) => OWN.has(s.field), ''], [(s) => s.field === 'mate', 'mate']]) {
    const first = list.findIndex(is), last = list.findLastIndex(is);
    if (first === last) continue;
    const between = list.slice(first, last + 1);
    if (between.reduce((n, s) => n + s.text.length, 0) > JOIN) continue;
    const numbers = between.map((s) => el('span', { 'data-text': s.text }, s.text));
    return [...list.slice(0, first).map(span), el('mark', { class: cls }, numbers), ...list.slice(last + 1).map(span)];
  }
  return list.map(span);
}

function span(s) {
  if (!s.field) return s.text;
  if (s.field === 'mate') return el('mark', { class: 'mate', 'data-text': s.text }, s.text);
  if (OWN.has(s.field)) return el('mark', { 'data-text': s.text }, s.text);
  return el('mark', { class: 'src', 'data-text': s.text }, s.text, el('span', { class: 'tag' }, TAGS[s.field] ?? s.field));
}

const WHOLE = 18; // characters of a cell that is not broken into lines

// table keeps its heading rows in view when it is scrolled.
function table(block) {
  const short = (c) => (c.spans ?? []).reduce((n, s) => n + s.text.length, 0) <= WHOLE;
  const row = (cells) => el('tr', {}, cells.map((c) => el(c.head ? 'th' : 'td', { class: short(c) ? 'whole' : null, rowspan: c.rows > 1 ? c.rows : null, colspan: c.cols > 1 ? c.cols : null }, spans(c.spans))));
  const body = block.rows.findIndex((cells) => cells.some((c) => !c.head));
  const head = body < 0 ? 0 : body;
  return el('table', {}, el('caption', {}, spans(block.spans)), el('thead', {}, block.rows.slice(0, head).map(row)), el('tbody', {}, block.rows.slice(head).map(row)));
}
