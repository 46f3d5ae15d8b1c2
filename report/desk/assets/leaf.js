// The leaf: the page of the paper as a picture with outlines, or, for papers
// without pages, the passage or table as read.
import { get } from './api.js';
import { $, el, svg, replace, say } from './dom.js';

const TAGS = { n: 'n', n2: 'n', arm: 'arm', arm2: 'arm', time: 'time', level: 'level', given_as: '±', unit: 'unit', outcome: 'what', statistic: 'kind' };
const OWN = new Set(['estimate', 'lower', 'upper', 'given_value']);

export class Leaf {
  constructor() {
    this.view = $('view');
    this.zoom = Number(sessionStorage.getItem('zoom') ?? 1);
    this.shown = null; // { paper, page } on the screen
    this.papers = new Map();
    this.onpick = null;
    this.onarea = null;
    this.#drag();
  }

  async show(paper, working, mates) {
    const facts = await this.#facts(paper);
    const page = working.record.page;
    if (facts.pages?.length && page) {
      this.#page(paper, facts, page, working, mates);
    } else {
      await this.#passage(paper, working);
    }
  }

  async #facts(paper) {
    if (!this.papers.has(paper)) this.papers.set(paper, await get('paper', { paper }));
    return this.papers.get(paper);
  }

  picture(paper, page) {
    const width = Math.round(this.width() * Math.min(devicePixelRatio || 1, 3) / 100) * 100;
    return `/page?${new URLSearchParams({ paper, page, width: Math.min(Math.max(width, 600), 3000) })}`;
  }

  width() { return Math.max(320, (this.view.clientWidth - 26) * this.zoom); }

  #page(paper, facts, number, working, mates) {
    const geometry = facts.pages.find((p) => p.number === number);
    if (!geometry) { replace(this.view, el('p', {}, `Page ${number} cannot be shown.`)); return; }
    const turned = geometry.rotate % 180 !== 0;
    const w = turned ? geometry.y1 - geometry.y0 : geometry.x1 - geometry.x0;
    const h = turned ? geometry.x1 - geometry.x0 : geometry.y1 - geometry.y0;
    const width = this.width();
    const image = el('img', { src: this.picture(paper, number), alt: `Page ${number} of the paper`, draggable: 'false' });
    image.addEventListener('error', () => say(`Page ${number} could not be drawn. The file may have changed or moved since the scan.`, true));
    const wait = el('p', { class: 'wait' }, 'The page is being drawn …');
    image.addEventListener('load', () => wait.remove());
    const over = svg('svg', { viewBox: `0 0 ${w} ${h}`, 'aria-hidden': 'true' });
    const sheet = el('div', { class: 'page' }, wait, image, over);
    sheet.style.width = `${width}px`;
    sheet.style.height = `${width * h / w}px`;
    const same = this.shown?.paper === paper && this.shown?.page === number;
    const scroll = [this.view.scrollLeft, this.view.scrollTop];
    this.shown = { paper, page: number, geometry, w, h, sheet };
    const first = this.#outline(over, geometry, working, mates, number);
    replace(this.view, sheet);
    if (same) [this.view.scrollLeft, this.view.scrollTop] = scroll;
    if (first) this.#reveal(first, width / w);
    $('page-number').textContent = `page ${number} of ${facts.pages.length}`;
    this.#ahead(paper, facts, number);
  }

  #ahead(paper, facts, number) {
    if (facts.pages.some((p) => p.number === number + 1)) this.prepare(paper, number + 1);
  }

  // prepare has a page drawn before it is asked for.
  prepare(paper, page) { new Image().src = this.picture(paper, page); }

  #outline(over, g, working, mates, number) {
    const seen = new Set();
    for (const mate of mates) for (const p of mate.record.places ?? []) {
      if (p.page === number && p.box && OWN.has(p.field)) over.append(this.#rect(this.#box(p.box, g), 'at-mate', 1.5));
    }
    const places = (working.record.places ?? []).filter((p) => p.page === number && p.box);
    for (const p of places.filter((p) => !OWN.has(p.field))) {
      const box = this.#box(p.box, g);
      over.append(this.#rect(box, 'at-source', 2));
      const key = `${box.x},${box.y}`;
      if (!seen.has(key)) over.append(svg('text', { class: 'at-tag', x: box.x, y: box.y - 4, 'font-size': 9 }, TAGS[p.field] ?? p.field));
      seen.add(key);
    }
    // One outline for each printed line that the result stands on.
    const lines = [];
    for (const p of places.filter((p) => OWN.has(p.field))) {
      const b = this.#box(p.box, g);
      const line = lines.find((l) => Math.min(l.y1, b.y1) - Math.max(l.y, b.y) > 0.5 * Math.min(l.y1 - l.y, b.y1 - b.y));
      if (line) Object.assign(line, { x: Math.min(line.x, b.x), y: Math.min(line.y, b.y), x1: Math.max(line.x1, b.x1), y1: Math.max(line.y1, b.y1) });
      else lines.push({ ...b });
    }
    for (const line of lines) over.append(this.#rect(line, 'at-result', 3));
    replace($('legend'), el('li', {}, '▭ solid: the result'), el('li', {}, '┄ dashed: where the rest was read'));
    return lines[0] ?? null;
  }

  // #box turns a box of the unrotated page (points, y upwards) into the shown
  // page (points, y downwards).
  #box([x0, y0, x1, y1], g) {
    const w = g.x1 - g.x0, h = g.y1 - g.y0;
    const turn = (x, y) => {
      const u = x - g.x0, v = y - g.y0;
      switch (((g.rotate % 360) + 360) % 360) {
        case 90: return [v, u];
        case 180: return [w - u, v];
        case 270: return [h - v, w - u];
        default: return [u, h - v];
      }
    };
    const [a, b] = [turn(x0, y0), turn(x1, y1)];
    return { x: Math.min(a[0], b[0]), y: Math.min(a[1], b[1]), x1: Math.max(a[0], b[0]), y1: Math.max(a[1], b[1]) };
  }

  // back turns a point of the shown page into the unrotated page.
  back(x, y) {
    const g = this.shown.geometry, w = g.x1 - g.x0, h = g.y1 - g.y0;
    switch (((g.rotate % 360) + 360) % 360) {
      case 90: return [g.x0 + y, g.y0 + x];
      case 180: return [g.x0 + w - x, g.y0 + y];
      case 270: return [g.x0 + w - y, g.y0 + h - x];
      default: return [g.x0 + x, g.y0 + h - y];
    }
  }

  #rect(b, cls, pad) {
    return svg('rect', { class: cls, x: b.x - pad, y: b.y - pad, width: b.x1 - b.x + 2 * pad, height: b.y1 - b.y + 2 * pad, rx: 1 });
  }

  #reveal(box, scale) {
    const top = box.y * scale, left = box.x * scale, v = this.view;
    if (top < v.scrollTop + 60 || top > v.scrollTop + v.clientHeight - 90) v.scrollTop = top - v.clientHeight / 3;
    if (left < v.scrollLeft || box.x1 * scale > v.scrollLeft + v.clientWidth) v.scrollLeft = left - 40;
  }

  async #passage(paper, working) {
    this.shown = { paper, page: null };
    const p = await get('passage', { paper, id: working.record.id });
    const parts = [];
    if (p.heading) parts.push(el('h2', {}, p.heading));
    for (const block of p.blocks) parts.push(block.rows ? this.#table(block) : el('p', { class: block.note ? 'note' : '' }, this.#spans(block.spans)));
    replace(this.view, el('article', { class: 'passage' }, parts));
    $('page-number').textContent = p.page ? `page ${p.page}` : 'text as read';
    replace($('legend'), el('li', {}, 'boxed: the result'), el('li', {}, 'dashed underline: where the rest was read'));
    this.view.querySelector('mark:not(.src)')?.scrollIntoView({ block: 'center' });
  }

  #spans(spans) {
    return (spans ?? []).map((s) => {
      if (!s.field) return s.text;
      const own = OWN.has(s.field) || s.field === 'result';
      return el('mark', { class: own ? '' : 'src', title: own ? 'the result' : `${s.field} was read here`, 'data-text': s.text }, s.text);
    });
  }

  #table(block) {
    return el('table', {}, el('caption', {}, this.#spans(block.spans)), block.rows.map((row) => el('tr', {},
      row.map((c) => el(c.head ? 'th' : 'td', { rowspan: c.rows > 1 ? c.rows : null, colspan: c.cols > 1 ? c.cols : null }, this.#spans(c.spans))))));
  }

  setZoom(z) {
    this.zoom = Math.min(4, Math.max(0.4, z));
    sessionStorage.setItem('zoom', this.zoom);
  }

  // point gives the place under the pointer in points of the unrotated page.
  point(event) {
    if (!this.shown?.sheet) return null;
    const r = this.shown.sheet.getBoundingClientRect();
    const x = (event.clientX - r.left) * this.shown.w / r.width, y = (event.clientY - r.top) * this.shown.h / r.height;
    return { shown: [x, y], page: this.back(x, y) };
  }

  #drag() {
    let from = null, area = null;
    const v = this.view;
    v.addEventListener('pointerdown', (e) => {
      if (e.button !== 0 || (e.offsetX > v.clientWidth)) return;
      from = { x: e.clientX, y: e.clientY, left: v.scrollLeft, top: v.scrollTop, moved: false, start: this.point(e) };
      if (this.onarea && from.start) { area = el('div', { class: 'draw' }); this.shown.sheet.append(area); }
    });
    addEventListener('pointermove', (e) => {
      if (!from) return;
      from.moved ||= Math.hypot(e.clientX - from.x, e.clientY - from.y) > 4;
      if (area) {
        const r = this.shown.sheet.getBoundingClientRect();
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
      const { moved, start } = from;
      from = null;
      v.classList.remove('drag');
      area?.remove();
      if (area && moved) { area = null; this.onarea?.(start.page, this.point(e).page); return; }
      area = null;
      if (!moved && v.contains(e.target)) this.onpick?.(e);
    });
  }
}
