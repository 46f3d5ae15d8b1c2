// What the desk says in words: one place for states, fields and reasons.
export const STATES = {
  open: 'open', confirmed: 'confirmed', amended: 'amended', dropped: 'dropped', queried: 'queried',
  'read differently since': 'read differently since your decision', 'no longer found': 'no longer found by this version',
};
export const REASONS = ['misread', 'wrong arm or time', 'misprint in the paper', 'not needed', 'printed twice', 'other'];
export const FIELDS = [
  ['estimate', 'estimate'], ['lower', 'lower bound'], ['upper', 'upper bound'], ['given_value', 'printed spread'],
  ['given_as', 'given as'], ['level', 'level'], ['statistic', 'statistic'], ['n', 'n'], ['n2', 'comparator n'],
  ['arm', 'arm'], ['arm2', 'comparator'], ['time', 'time'], ['subgroup', 'subgroup'], ['outcome', 'outcome'], ['unit', 'unit'], ['adjusted', 'adjusted'],
];
// OWN are the fields that are the result itself; TAGS name the others where they
// are outlined on the page.
export const OWN = new Set(['estimate', 'lower', 'upper', 'given_value']);
export const TAGS = {
  n: 'n', n2: 'n', arm: 'arm', arm2: 'arm', time: 'time', subgroup: 'subgroup', level: 'level', given_as: 'spread', unit: 'unit',
  outcome: 'outcome', statistic: 'kind', adjusted: 'adjusted', p: 'p',
};
const GIVEN = { ci: 'a confidence interval', sd: 'an SD', se: 'an SE', iqr: 'quartiles', range: 'a range', unstated: 'not said in the paper' };
// SHORT are the same where there is little room.
export const SHORT = { ci: 'interval (CI)', sd: 'SD', se: 'SE', iqr: 'quartiles', range: 'range', unstated: 'not said' };
export const CHOICES = {
  given_as: ['ci', 'sd', 'se', 'iqr', 'range', 'unstated'],
  statistic: ['mean', 'mean difference', 'mean change', 'median', 'geometric mean', 'ratio', 'proportion', 'risk difference', 'rate', 'coefficient', 'other'],
  adjusted: ['', 'yes', 'no', 'unclear'],
};
export const SOURCES = ['table', 'text', 'figure', 'supplement', "author's reply"];
export const KEYS = [
  ['↓ or j', 'next row'], ['↑ or k', 'row before'], ['← →', 'cell of the row'], ['Enter', 'confirm the open cells of this row that are on the screen'],
  ['c', 'confirm this cell only'], ['a', 'amend this cell'], ['x', 'drop this cell, with a reason'], ['X', 'drop the open cells of this row that are on the screen, with one reason'], ['q', 'query this cell'], ['u', 'take the last decision back'],
  ['d', 'next doubtful'], ['o', 'next open'], ['/', 'find'], ['s', 'show or hide what is set aside'], ['w', 'star this outcome: starred ones come first'],
  ['m', 'add a result the program missed'], ['+ −', 'larger and smaller page'], ['0', 'whole width of the page, or legible size'], ['v', 'show where the rest was read that is out of view: other pages too'], ['t', 'turn the page'], ['p', 'to the page, which the arrows scroll, and back'], ['Page ↑ ↓', 'scroll what stands beside the page'], ['Esc', 'leave a form'], ['?', 'this overview'],
];

// inWords says the value of a field as a person would.
export function inWords(field, r) {
  const v = r[field];
  if (v === null || v === undefined || v === '') return '';
  switch (field) {
    case 'given_as': return GIVEN[v] ?? v;
    case 'level': return `${v}%`;
    case 'statistic': return r.measure && r.measure !== v ? `${v} (${r.measure})` : v;
    default: return String(v);
  }
}

export const minus = (v) => String(v ?? '').replace(/^-/, '−');

// printed writes a record's result as the paper prints it.
export function printed(r) {
  const e = `${minus(r.estimate)}${r.unit === '%' ? '%' : ''}`;
  const bounds = `${r.lower === null ? '…' : minus(r.lower)} to ${r.upper === null ? '…' : minus(r.upper)}`;
  switch (r.given_as) {
    case 'ci': return `${e} (${r.level ? `${r.level}% ` : ''}CI ${bounds})`;
    case 'iqr': return r.lower ? `${e} (IQR ${bounds})` : `${e} (IQR ${r.given_value})`;
    case 'range': return r.lower ? `${e} (range ${bounds})` : `${e} (range ${r.given_value})`;
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
  const unit = 10 ** k, outwards = (round, v) => (round(Number((v * unit).toPrecision(9))) / unit).toFixed(k);
  return `SD ${Number(r.sd).toFixed(k)} (${outwards(Math.floor, lo)} to ${outwards(Math.ceil, hi)})`;
}

export const who = (r) => [r.arm, r.arm2 && `against ${r.arm2}`, r.time, r.subgroup].filter(Boolean).join(', ') || 'arm not read';
