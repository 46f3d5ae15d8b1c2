// The leaf: the page of the paper as a picture with outlines, or, for papers
// without pages, the passage or table as read.
import { get } from './api.js';
import { $, el, replace, say, svg } from './dom.js';
import { passageView } from './passage.js';
import { Sheet, uprightTurn } from './sheet.js';
import { Ink, place } from './tags.js';
import { OWN, TAGS } from './words.js';

const LEGIBLE = 1.3; // pixels a point: print of 8 points can be read
const LEAST = 1; // the same, for a row that is wider than the view
const MARGIN = 26; // of the view beside the page
const SHARP = 1000; // pixels; a picture that is wider takes longer to draw
const within = (a, b) => a.x > b.x - 1 && a.x1 < b.x1 + 1 && a.y > b.y - 2 && a.y1 < b.y1 + 2;

export class Leaf {
  constructor() {
    this.view = $('view');
    this.zoom = JSON.parse(sessionStorage.getItem('zoom') ?? '"legible"'); // or "width", or pixels a point
    this.text = Number(sessionStorage.getItem('text') ?? 16); // pixels, of papers without pages
    this.shown = null; // { paper, page, sheet, node, scale } on the screen
    this.leaves = new Map();
    this.turns = new Map(); // of pages turned by hand
    this.ready = new Set(); // addresses of pictures that were drawn
    this.soon = ''; // pixels, of the picture that was asked for first last time
    this.onseen = null;
    this.onpick = null;
    this.onarea = null;
    this.#drag();
  }

  // show shows where a working was read; with place, the page of one of its
  // sources, which may be another; blind, the numbers only, for one who is to find
  // the rest alone. onseen is called when it can be seen or cannot be drawn.
  async show(paper, working, mates, { place = null, blind = false } = {}) {
    const turn = (this.last ?? 0) + 1;
    this.last = turn;
    const page = place?.page ?? working.record.page;
    const leaf = page ? await this.#leaf(paper, page) : null;
    if (this.last !== turn) return; // moved on meanwhile
    this.now = { paper, working, mates, place, blind };
    if (leaf?.of) await this.#page(leaf, page);
    else await this.#passage(place);
    if (this.last === turn) this.onseen?.();
  }

  // none says why nothing can be shown.
  none(why) {
    this.shown = null;
    replace(this.view, el('p', { class: 'passage' }, why));
    $('page-number').textContent = '';
    replace($('legend'));
  }

  again() { if (this.now) return this.show(this.now.paper, this.now.working, this.now.mates, this.now); }

  #leaf(paper, page) {
    const key = `${paper} ${page}`;
    if (!this.leaves.has(key)) {
      const asked = get('leaf', { paper, page, soon: this.soon });
      this.leaves.set(key, asked);
      asked.catch(() => this.leaves.delete(key));
    }
    return this.leaves.get(key);
  }

  // #address is that of a picture of the page, wide pixels of the screen wide.
  #address(paper, page, wide) {
    return `/page?${new URLSearchParams({ paper, page, width: pixels(wide) })}`;
  }

  #scale(sheet, row = 0) {
    const room = Math.max(320, this.view.clientWidth - MARGIN), whole = room / sheet.w;
    if (this.zoom === 'width') return whole;
    if (this.zoom !== 'legible') return this.zoom;
    // A wide row is shown whole where that leaves it legible.
    const fits = row > 0 ? (room - 40) / row : Infinity;
    return Math.max(whole, fits < LEGIBLE && fits >= LEAST ? fits : LEGIBLE);
  }

  // #rowWidth is how wide the row's numbers with their label stand on the page.
  #rowWidth(sheet, page) {
    const { working, mates } = this.now;
    const boxes = [working, ...mates].flatMap((w) => (w.record.places ?? []).filter((p) => p.page === page && p.box && (OWN.has(p.field) || (p.field === 'outcome' && w.record.table))).map((p) => sheet.box(p.box)));
    return boxes.length ? Math.max(...boxes.map((b) => b.x1)) - Math.min(...boxes.map((b) => b.x)) : 0;
  }

  #sheet(leaf, page) {
    const { paper, working, mates } = this.now;
    const here = (w) => (w.record.places ?? []).filter((p) => p.page === page && p.box);
    const own = (w) => here(w).filter((p) => OWN.has(p.field));
    const others = here(working).filter((p) => !OWN.has(p.field));
    const byHand = this.turns.get(`${paper} ${page}`);
    const before = own(working).length ? others.find((p) => p.field === 'outcome') : null;
    return new Sheet(leaf, byHand ?? uprightTurn(leaf, [working, ...mates].flatMap(own), others, before));
  }

  #page(leaf, page) {
    const { paper, place: focus } = this.now;
    const sheet = this.#sheet(leaf, page), scale = this.#scale(sheet, this.#rowWidth(sheet, page));
    const wide = sheet.drawn.w * scale, high = sheet.drawn.h * scale;
    const over = svg('svg', { viewBox: `0 0 ${sheet.w} ${sheet.h}`, 'aria-hidden': 'true' });
    const node = el('div', { class: 'page' });
    Object.assign(node.style, { width: `${sheet.w * scale}px`, height: `${sheet.h * scale}px` });
    const same = this.shown?.paper === paper && this.shown?.page === page && this.shown.sheet.turn === sheet.turn && this.shown.scale === scale;
    const scroll = [this.view.scrollLeft, this.view.scrollTop];
    const boxes = this.#outline(over, sheet, page);
    const tag = (image) => { if (over.isConnected) this.#tag(over, sheet, scale, boxes, image); };
    // A page seen before is one node still: the picture does not blink.
    const pictures = same && this.shown.pictures.isConnected ? this.shown.pictures : this.#pictures(paper, page, wide, high, sheet.turn);
    this.shown = { paper, page, sheet, node, scale, pictures, of: leaf.of };
    node.append(pictures, over);
    replace(this.view, node);
    [this.view.scrollLeft, this.view.scrollTop] = same ? scroll : [0, 0];
    const main = focus ? boxes.sources.find((s) => s.places.includes(focus)) ?? boxes.result[0] : boxes.result[0];
    if (main) this.#reveal(main, [[...boxes.result, ...boxes.mates], boxes.sources], scale);
    pictures.seen.then((image) => image && tag(image));
    $('page-number').textContent = `page ${page} of ${leaf.of}${sheet.turn ? ', turned' : ''}`;
    for (const b of document.querySelectorAll('[data-do=turn], [data-do=zoom-fit]')) b.hidden = false;
    this.#legend();
    if (page < leaf.of) this.prepare(paper, page + 1);
    return pictures.seen;
  }

  // #pictures is the page's picture; a coarse one first where the sharp one will
  // take a while.
  #pictures(paper, page, wide, high, turn) {
    const density = Math.min(devicePixelRatio || 1, 3);
    const sharp = this.#address(paper, page, wide * density);
    const group = el('div', { class: 'pictures' }, el('p', { class: 'wait' }, 'The page is being drawn …'));
    let see;
    group.seen = new Promise((resolve) => { see = resolve; });
    const add = (src, cls, alt) => {
      const image = el('img', { class: cls, src, alt, draggable: 'false' });
      Object.assign(image.style, { width: `${wide}px`, height: `${high}px`, transform: `translate(-50%, -50%) rotate(${turn}deg)` });
      image.addEventListener('load', () => {
        if (cls === 'coarse') add(sharp, 'sharp', name);
        this.ready.add(src);
        group.querySelector('.wait')?.remove();
        if (cls === 'sharp') group.querySelector('.coarse')?.remove();
        requestAnimationFrame(() => see(image)); // painted
      });
      if (cls === 'coarse') image.addEventListener('error', () => add(sharp, 'sharp', name));
      else {
        image.addEventListener('error', () => {
          say(`Page ${page} could not be drawn. The file may have changed or moved since the scan.`, true);
          see(null);
        });
      }
      group.append(image);
    };
    const name = `Page ${page} of the paper`;
    const coarse = wide * density > SHARP && !this.ready.has(sharp);
    this.soon = pixels(coarse ? wide * density / 2 : wide * density);
    if (coarse) add(this.#address(paper, page, wide * density / 2), 'coarse', name);
    else add(sharp, 'sharp', name);
    return group;
  }

  // prepare has a page drawn before it is asked for.
  async prepare(paper, page) {
    const leaf = await this.#leaf(paper, page).catch(() => null);
    if (!leaf?.of) return;
    const sheet = new Sheet(leaf, this.turns.get(`${paper} ${page}`) ?? 0);
    const src = this.#address(paper, page, sheet.drawn.w * this.#scale(sheet) * Math.min(devicePixelRatio || 1, 3));
    if (this.ready.has(src)) return;
    const image = new Image();
    image.onload = () => this.ready.add(src);
    image.src = src;
  }

  // #outline draws where the result and the rest were read on this page, and
  // gives their boxes.
  #outline(over, sheet, page) {
    const { working, mates, blind } = this.now;
    const on = (w) => (w.record.places ?? []).filter((p) => p.page === page && p.box && !(blind && !OWN.has(p.field))).map((p) => ({ ...sheet.box(p.box), place: p }));
    const own = (w) => lines(on(w).filter((b) => OWN.has(b.place.field)), w.record.table ? 1.5 : Infinity);
    const result = own(working);
    const inside = (b) => result.some((r) => within(b, r));
    const sources = [];
    const area = (b) => (b.x1 - b.x) * (b.y1 - b.y);
    for (const b of on(working).filter((s) => !OWN.has(s.place.field) && !inside(s)).sort((p, q) => area(q) - area(p))) {
      const holder = sources.find((s) => within(b, s));
      const tag = TAGS[b.place.field] ?? b.place.field;
      if (!holder) sources.push({ ...b, tags: [tag], places: [b.place] });
      else { holder.places.push(b.place); if (!holder.tags.includes(tag)) holder.tags.push(tag); }
    }
    const others = mates.flatMap(own);
    for (const mate of mates) {
      for (const b of own(mate)) over.append(frame(b, 'at-mate', 1.5));
      for (const b of on(mate)) if (!OWN.has(b.place.field) && !sources.some((s) => within(b, s))) over.append(bracket(b, 'at-source mate'));
    }
    for (const s of sources) over.append(bracket(s, 'at-source'));
    for (const r of result) over.append(frame(r, 'at-result', 2.5));
    return { result, sources, mates: others };
  }

  #tag(over, sheet, scale, { result, sources, mates }, image) {
    const size = 11 / scale;
    const taken = [...result, ...sources, ...mates];
    const tags = sources.map((s) => ({ text: s.tags.join(', '), box: s }));
    try {
      if (this.ink?.of !== image.src || this.ink.turn !== sheet.turn) this.ink = { of: image.src, turn: sheet.turn, on: new Ink(image, sheet.turn) };
      for (const t of place(tags, this.ink.on, { w: sheet.w, h: sheet.h, size, taken })) {
        over.append(svg('text', { class: 'at-tag', x: t.x + 0.2 * size, y: t.y + 0.82 * size, 'font-size': size }, t.text));
      }
    } catch { /* a picture too large to look into: the outlines stand without names */ }
  }

  // #reveal scrolls as little as shows the result with as much of the rest of its
  // row, and then of its sources, as the view holds.
  #reveal(main, [row, sources], scale) {
    const v = this.view, room = { w: v.clientWidth - 60, h: v.clientHeight - 60 };
    let want = main;
    const distance = (b) => Math.abs(b.y - main.y) + Math.abs(b.x - main.x);
    const nearest = (list) => [...list].sort((p, q) => distance(p) - distance(q));
    for (const b of [...nearest(row), ...nearest(sources)]) {
      const more = { x: Math.min(want.x, b.x), y: Math.min(want.y, b.y), x1: Math.max(want.x1, b.x1), y1: Math.max(want.y1, b.y1) };
      if ((more.x1 - more.x) * scale <= room.w && (more.y1 - more.y) * scale <= room.h) want = more;
    }
    const node = this.shown.node, top = node.offsetTop, left = node.offsetLeft;
    const y = top + want.y * scale, y1 = top + want.y1 * scale, x = left + want.x * scale, x1 = left + want.x1 * scale;
    // Down the page with what stands around it, across no further than needed.
    if (y < v.scrollTop + 30 || y1 > v.scrollTop + v.clientHeight - 60) v.scrollTop = (y + y1 - v.clientHeight) / 2;
    if (x < v.scrollLeft + 30) v.scrollLeft = x - 30;
    else if (x1 > v.scrollLeft + v.clientWidth - 30) v.scrollLeft = x1 - v.clientWidth + 30;
  }

  // away lists the places of the working that cannot be seen now: on another page
  // or scrolled out of view.
  away() {
    const places = (this.now?.working.record.places ?? []).filter((p) => !OWN.has(p.field));
    if (!this.shown) return [];
    if (!this.shown.page) return places.filter((p) => p.byte_offset !== null && !this.inPassage?.has(p.byte_offset));
    return places.filter((p) => p.box && !this.#inView(p));
  }

  #inView(p) {
    const { node, scale, sheet, page } = this.shown, v = this.view;
    if (p.page !== page) return false;
    const box = sheet.box(p.box), inside = (x, end) => Math.min(Math.max(x, 0), end); // of the page, whatever the file says
    const b = { x: inside(box.x, sheet.w), x1: inside(box.x1, sheet.w), y: inside(box.y, sheet.h), y1: inside(box.y1, sheet.h) };
    const left = node.offsetLeft - v.scrollLeft, top = node.offsetTop - v.scrollTop;
    return left + b.x * scale >= 0 && top + b.y * scale >= 0 && left + b.x1 * scale <= v.clientWidth && top + b.y1 * scale <= v.clientHeight;
  }

  // sees says whether the numbers of a working are in view. What has no place, as
  // what was typed by hand, cannot be looked for.
  sees(working) {
    if (!this.shown) return false;
    const own = (working.record.places ?? []).filter((p) => OWN.has(p.field));
    if (!this.shown.page) return own.every((p) => p.byte_offset === null || this.inPassage?.has(p.byte_offset));
    if (this.shown.page !== working.record.page) return own.every((p) => !p.box);
    // A number that the paper carries over to the next page cannot be in view too.
    return own.every((p) => !p.box || p.page !== this.shown.page || this.#inView(p));
  }

  // elsewhere shows, one after the other, the places that the result was read
  // from and that are out of view; after the last the result again.
  async elsewhere() {
    if (!this.now) return;
    const { paper, working, mates, blind } = this.now;
    if (blind) { say('First type what you see; then all that it rests on is shown.'); return; }
    this.tour ??= this.away();
    const p = this.tour.shift();
    if (!p) {
      this.tour = null;
      if (!this.now.place) { say('All that this result was read from is in view.'); return; }
      await this.show(paper, working, mates);
      say('Back at the result.');
      return;
    }
    await this.show(paper, working, mates, { place: p });
    say(`${TAGS[p.field] ?? p.field} was read here: “${p.text.slice(0, 80)}”. v goes on.`);
  }

  async #passage(focus) {
    const { paper, working, mates, blind } = this.now;
    const ask = { paper, id: working.record.id, mates: mates.map((m) => m.record.id).join(' ') };
    if (focus) ask.at = focus.byte_offset;
    const p = await get('passage', ask);
    this.shown = { paper, page: null };
    this.inPassage = new Set(p.holds);
    const passage = passageView(p, blind);
    passage.style.fontSize = `${this.text}px`;
    replace(this.view, passage);
    for (const b of document.querySelectorAll('[data-do=turn], [data-do=zoom-fit]')) b.hidden = true;
    $('page-number').textContent = p.page ? `page ${p.page}` : 'text as read';
    this.#legend();
    this.view.querySelector(focus ? 'mark.src' : 'mark:not(.src)')?.scrollIntoView({ block: 'center' });
  }

  #legend() {
    const away = this.now.place || this.now.blind ? 0 : this.away().length;
    replace($('legend'), away > 0 && el('li', {}, `${away} elsewhere `, el('kbd', {}, 'v')),
      el('li', {}, el('span', { class: 'key own' }), 'the result'), el('li', {}, el('span', { class: 'key src' }), 'what it rests on'));
  }

  // turn turns the page a quarter clockwise.
  turn() {
    if (!this.shown?.page) return;
    const { paper, page, sheet } = this.shown;
    this.turns.set(`${paper} ${page}`, (sheet.turn + 90) % 360);
    return this.again();
  }

  // magnify multiplies the scale, or shows the whole width.
  magnify(by) {
    if (this.shown && !this.shown.page) {
      this.text = Math.min(40, Math.max(11, this.text * (by || 1)));
      sessionStorage.setItem('text', this.text);
      return this.again();
    }
    const now = this.shown?.scale ?? LEGIBLE;
    this.zoom = by ? Math.min(6, Math.max(0.4, now * by)) : this.zoom === 'width' ? 'legible' : 'width';
    sessionStorage.setItem('zoom', JSON.stringify(this.zoom));
    return this.again();
  }

  // point gives the place under the pointer in points of the unrotated page.
  point(event) {
    if (!this.shown?.node) return null;
    const { node, sheet } = this.shown;
    const r = node.getBoundingClientRect();
    return sheet.back((event.clientX - r.left) * sheet.w / r.width, (event.clientY - r.top) * sheet.h / r.height);
  }

  #drag() {
    let from = null, area = null;
    const v = this.view;
    v.addEventListener('pointerdown', (e) => {
      if (e.button !== 0 || (e.offsetX > v.clientWidth)) return;
      from = { x: e.clientX, y: e.clientY, left: v.scrollLeft, top: v.scrollTop, moved: false, start: this.point(e) };
      if (this.onarea && from.start) { area = el('div', { class: 'draw' }); this.shown.node.append(area); }
    });
    addEventListener('pointermove', (e) => {
      if (!from) return;
      from.moved ||= Math.hypot(e.clientX - from.x, e.clientY - from.y) > 4;
      if (area) {
        const r = this.shown.node.getBoundingClientRect();
        Object.assign(area.style, {
          left: `${Math.min(e.clientX, from.x) - r.left}px`, top: `${Math.min(e.clientY, from.y) - r.top}px`,
          width: `${Math.abs(e.clientX - from.x)}px`, height: `${Math.abs(e.clientY - from.y)}px`,
        });
      } else if (from.moved) {
        v.classList.add('drag');
        v.scrollLeft = from.left + from.x - e.clientX;
        v.scrollTop = from.top + from.y - e.clientY;
      }
    });
    addEventListener('pointerup', (e) => {
      if (!from) return;
      const { moved, start } = from, drawn = area;
      from = area = null;
      v.classList.remove('drag');
      drawn?.remove();
      if (drawn && moved) this.onarea?.(start, this.point(e));
      else if (!moved && v.contains(e.target)) this.onpick?.(e);
    });
  }
}

// pixels rounds a width up, so that few widths of a page are drawn and none is
// stretched.
const pixels = (wide) => Math.min(Math.max(100 * Math.ceil(wide / 100), 600), 3000);

// lines joins boxes that stand on one printed line no further apart than gap
// times their height: what stands between two columns of a table is not theirs.
function lines(boxes, gap) {
  const out = [];
  const level = (a, b) => Math.min(a.y1, b.y1) - Math.max(a.y, b.y) > 0.5 * Math.min(a.y1 - a.y, b.y1 - b.y);
  const close = (a, b) => Math.max(a.x, b.x) - Math.min(a.x1, b.x1) <= gap * (a.y1 - a.y);
  for (const b of boxes) {
    const line = out.find((l) => level(l, b) && close(l, b));
    if (line) Object.assign(line, { x: Math.min(line.x, b.x), y: Math.min(line.y, b.y), x1: Math.max(line.x1, b.x1), y1: Math.max(line.y1, b.y1) });
    else out.push({ x: b.x, y: b.y, x1: b.x1, y1: b.y1 });
  }
  return out;
}

function frame(b, cls, pad) {
  return svg('rect', { class: cls, x: b.x - pad, y: b.y - pad, width: b.x1 - b.x + 2 * pad, height: b.y1 - b.y + 2 * pad, rx: 1 });
}

// bracket is a dashed line under a place with a short end up at either side: it
// crosses no print and is told from a frame by its form.
function bracket(b, cls) {
  const foot = b.y1 + 1, up = Math.max(b.y, foot - 4);
  return svg('path', { class: cls, d: `M${b.x - 1} ${up}V${foot}H${b.x1 + 1}V${up}` });
}
