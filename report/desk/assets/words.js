// What the desk says in words: one place for states, fields and reasons.
export const STATES = {
  open: 'open', confirmed: 'confirmed', amended: 'amended', dropped: 'dropped', queried: 'queried',
  'read differently since': 'read differently since your decision', 'no longer found': 'no longer found by this version',
};
export const REASONS = ['misread', 'wrong arm or time', 'misprint in the paper', 'not needed', 'printed twice', 'other'];
export const FIELDS = [
  ['estimate', 'estimate'], ['lower', 'lower bound'], ['upper', 'upper bound'], ['given_value', 'printed spread'],
  ['given_as', 'given as'], ['level', 'level, %'], ['statistic', 'statistic'], ['n', 'n'], ['n2', 'n of the comparator'],
  ['arm', 'arm'], ['arm2', 'comparator'], ['time', 'time'], ['subgroup', 'subgroup'], ['outcome', 'outcome'], ['unit', 'unit'], ['adjusted', 'adjusted'],
];
export const CHOICES = {
  given_as: ['ci', 'sd', 'se', 'iqr', 'range', 'unstated'],
  statistic: ['mean', 'mean difference', 'mean change', 'median', 'geometric mean', 'ratio', 'proportion', 'risk difference', 'rate', 'coefficient', 'other'],
  adjusted: ['', 'yes', 'no', 'unclear'],
};
export const SOURCES = ['table', 'text', 'figure', 'supplement', "author's reply"];
export const KEYS = [
  ['↓ or j', 'next row'], ['↑ or k', 'row before'], ['← →', 'cell of the row'], ['Enter', 'confirm the open cells of this row that are on the screen'],
  ['c', 'confirm this cell only'], ['a', 'amend this cell'], ['x', 'drop this cell, with a reason'], ['q', 'query this cell'], ['u', 'take the last decision back'],
  ['d', 'next doubtful'], ['o', 'next open'], ['/', 'find'], ['s', 'show or hide what is set aside'], ['w', 'star this outcome: starred ones come first'],
  ['m', 'add a result the program missed'], ['+ − 0', 'zoom the page'], ['p', 'to the page and back'], ['Esc', 'leave a form'], ['?', 'this overview'],
];

// printed writes a record's result as the paper prints it.
export function printed(r) {
  const level = r.level ? `${r.level}% ` : '';
  const unit = r.unit === '%' ? '%' : '';
  const e = `${r.estimate ?? ''}${unit}`;
  switch (r.given_as) {
    case 'ci': return `${e} (${level}CI ${r.lower ?? '…'} to ${r.upper ?? '…'})`;
    case 'iqr': return r.lower ? `${e} (IQR ${r.lower} to ${r.upper})` : `${e} (IQR ${r.given_value})`;
    case 'range': return r.lower ? `${e} (range ${r.lower} to ${r.upper})` : `${e} (range ${r.given_value})`;
    case 'sd': return `${e} (SD ${r.given_value})`;
    case 'se': return `${e} (SE ${r.given_value})`;
    default: return `${e} ± ${r.given_value} (meaning unstated)`;
  }
}

const short = (v, digits = 4) => (v === null || v === undefined ? '' : String(Number(Number(v).toPrecision(digits))));

// deserved shows the SD with the digits that its range deserves.
export function spread(r) {
  if (r.sd === null || r.sd === undefined) return r.use === 'withheld' ? 'SD withheld' : 'no SD';
  if (r.use === 'printed') return `SD ${r.given_value ?? short(r.sd)}`;
  const lo = r.sd_digits_low, hi = r.sd_digits_high;
  if (lo === null || hi === null || lo === undefined || hi === undefined || hi <= lo) return `SD ${short(r.sd)}`;
  const k = Math.max(0, Math.min(8, Math.ceil(-Math.log10(hi - lo))));
  return `SD ${Number(r.sd).toFixed(k)} (${short(lo)} to ${short(hi)})`;
}

export const who = (r) => [r.arm, r.arm2 && `against ${r.arm2}`, r.time, r.subgroup].filter(Boolean).join(', ') || 'arm not read';
