// Names the outlined places of a page, in the white beside them: a tag never
// stands on print.

// Ink knows where a picture of a page is printed.
export class Ink {
  constructor(image, turn, maxWidth = 900) {
    const natural = [image.naturalWidth, image.naturalHeight];
    const k = Math.min(1, maxWidth / natural[0]);
    const w = Math.round(natural[0] * k), h = Math.round(natural[1] * k);
    const turned = turn % 180 !== 0;
    const canvas = document.createElement('canvas');
    [this.w, this.h] = turned ? [h, w] : [w, h];
    canvas.width = this.w;
    canvas.height = this.h;
    const pen = canvas.getContext('2d', { willReadFrequently: true });
    pen.translate(this.w / 2, this.h / 2);
    pen.rotate(turn * Math.PI / 180);
    pen.drawImage(image, -w / 2, -h / 2, w, h);
    this.data = pen.getImageData(0, 0, this.w, this.h).data;
  }

  // covered is the share of a box (in parts of the page's width and height) that
  // is printed on: darker than its own ground, which may be shaded.
  covered(x0, y0, x1, y1) {
    const left = Math.max(0, Math.floor(x0 * this.w)), right = Math.min(this.w, Math.ceil(x1 * this.w));
    const top = Math.max(0, Math.floor(y0 * this.h)), bottom = Math.min(this.h, Math.ceil(y1 * this.h));
    let ground = 0, inked = 0, all = 0;
    for (let pass = 0; pass < 2; pass++) {
      for (let y = top; y < bottom; y++) for (let x = left; x < right; x++) {
        const v = this.data[4 * (y * this.w + x) + 1];
        if (pass === 0) { ground = Math.max(ground, v); all++; } else if (v < ground - 40) inked++;
      }
    }
    return all ? inked / all : 1;
  }
}

const meets = (a, b) => a.x < b.x1 && b.x < a.x1 && a.y < b.y1 && b.y < a.y1;

// place finds for each tag (its text and the box that it names, in points) where
// it can stand on a page of w by h points: beside the box, else where its line of
// print ends, pointing at it. Where there is no white the outline alone has to do:
// a tag further off would seem to belong to something else. size is the height.
export function place(tags, ink, { w, h, size, taken }) {
  const used = [...taken];
  const white = (b) => b.x >= 0 && b.y >= 0 && b.x1 <= w && b.y1 <= h && ink.covered(b.x / w, b.y / h, b.x1 / w, b.y1 / h) === 0;
  return tags.map(({ text, box }) => {
    for (const spot of [...beside(text, box, size), ...lineEnds(text, box, size, w, white)]) {
      const wide = size * (0.68 * spot.text.length + 0.3);
      const b = { text: spot.text, x: spot.end ? spot.x - wide : spot.x, y: spot.y, y1: spot.y + size };
      b.x1 = b.x + wide;
      if (used.some((u) => meets(u, b)) || !white(b)) continue;
      used.push(b);
      return b;
    }
    return null;
  }).filter(Boolean);
}

function beside(text, box, size) {
  const above = box.y - size - 1.5, below = box.y1 + 1.5, level = (box.y + box.y1 - size) / 2;
  return [
    { text, x: box.x, y: above }, { text, x: box.x, y: below },
    { text, x: box.x1, y: above, end: true }, { text, x: box.x1, y: below, end: true },
    { text, x: box.x1 + 2, y: level }, { text, x: box.x - 2, y: level, end: true },
  ];
}

// lineEnds are where the column of print that holds the box ends to its right and
// to its left: the first white as wide as the one between two columns.
function lineEnds(text, box, size, w, white) {
  const level = (box.y + box.y1 - size) / 2, gap = 0.8 * size, out = [];
  const free = (x) => white({ x, y: level, x1: x + gap, y1: level + size });
  let right = box.x1, left = box.x;
  while (right < w - gap && !free(right)) right += size / 5;
  while (left > gap && !free(left - gap)) left -= size / 5;
  if (box.x - left <= right - box.x1) out.push({ text: `${text} ▸`, x: left - 1, y: level, end: true }, { text: `◂ ${text}`, x: right + 1, y: level });
  else out.push({ text: `◂ ${text}`, x: right + 1, y: level }, { text: `${text} ▸`, x: left - 1, y: level, end: true });
  return out;
}
