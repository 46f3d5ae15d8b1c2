// The geometry of one shown page: where a box of the unrotated page (points, y
// upwards) stands on the screen (points, y downwards), and the way back.
const quarter = (degrees) => ((degrees % 360) + 360) % 360;

export class Sheet {
  // leaf is the page's geometry as the server gives it; turn is how many degrees
  // clockwise the page is turned on top of how a viewer shows it.
  constructor(leaf, turn = 0) {
    this.leaf = leaf;
    this.turn = quarter(turn);
    this.degrees = quarter(leaf.rotate + this.turn);
    const wide = leaf.x1 - leaf.x0, high = leaf.y1 - leaf.y0;
    [this.w, this.h] = this.degrees % 180 ? [high, wide] : [wide, high];
    // As a viewer shows it, which is how its picture is drawn.
    this.drawn = leaf.rotate % 180 ? { w: high, h: wide } : { w: wide, h: high };
  }

  at(x, y) {
    const g = this.leaf, left = x - g.x0, up = y - g.y0, right = g.x1 - x, down = g.y1 - y;
    switch (this.degrees) {
      case 90: return [up, left];
      case 180: return [right, up];
      case 270: return [down, right];
      default: return [left, down];
    }
  }

  back(x, y) {
    const g = this.leaf;
    switch (this.degrees) {
      case 90: return [g.x0 + y, g.y0 + x];
      case 180: return [g.x1 - x, g.y0 + y];
      case 270: return [g.x1 - y, g.y1 - x];
      default: return [g.x0 + x, g.y1 - y];
    }
  }

  box([x0, y0, x1, y1]) {
    const [a, b] = [this.at(x0, y0), this.at(x1, y1)];
    return { x: Math.min(a[0], b[0]), y: Math.min(a[1], b[1]), x1: Math.max(a[0], b[0]), y1: Math.max(a[1], b[1]) };
  }
}

// uprightTurn gives the turn that makes a result read level which is printed
// sideways on the page, as wide tables are; 0 for one that reads level already.
// numbers are the places of the row's numbers, the result's own first; others are
// its label and headings, which tell where the numbers are too short to; before is
// a place that stands before the numbers in reading order, the row's label.
export function uprightTurn(leaf, numbers, others = [], before = null) {
  const long = [numbers, others].map((list) => list.filter((p) => p.text.length >= 3)).find((list) => list.length);
  if (!long) return 0;
  const tall = long.filter(({ box: [x0, y0, x1, y1] }) => y1 - y0 > x1 - x0);
  const upwards = 2 * tall.length > long.length; // along y of the unrotated page
  if (upwards === (leaf.rotate % 180 !== 0)) return 0;
  const axis = upwards ? 1 : 0;
  const length = (p) => p.box[axis + 2] - p.box[axis];
  const middle = (p) => (p.box[axis + 2] + p.box[axis]) / 2;
  // Which way the line runs: from the label to the numbers, from the estimate to
  // its spread. Numbers below one another say nothing.
  let runs = 0;
  const order = [before, ...numbers].filter(Boolean);
  for (let i = 1; i < order.length; i++) {
    const step = middle(order[i]) - middle(order[i - 1]);
    if (Math.abs(step) > 0.6 * length(order[i])) runs += Math.sign(step);
  }
  const needed = upwards ? (runs < 0 ? 270 : 90) : (runs < 0 ? 180 : 0);
  return quarter(needed - leaf.rotate);
}
