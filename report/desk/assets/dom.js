// Builds elements from plain values. Text from papers only ever becomes text
// nodes or attributes, never markup.
const SVG = 'http://www.w3.org/2000/svg';

function fill(node, props, children) {
  for (const [key, value] of Object.entries(props ?? {})) {
    if (value === undefined || value === null || value === false) continue;
    if (key.startsWith('on')) node.addEventListener(key.slice(2), value);
    else node.setAttribute(key, value === true ? '' : value);
  }
  node.append(...children.flat(Infinity).filter((c) => c !== null && c !== undefined && c !== false));
  return node;
}

export const el = (name, props, ...children) => fill(document.createElement(name), props, children);
export const svg = (name, props, ...children) => fill(document.createElementNS(SVG, name), props, children);
export const $ = (id) => document.getElementById(id);

export function replace(node, ...children) {
  node.replaceChildren(...children.flat(Infinity).filter((c) => c !== null && c !== undefined && c !== false));
}

// say tells what was done, to eyes and to screen readers.
export function say(text, bad = false) {
  const line = $('said');
  line.textContent = text;
  line.className = bad ? 'bad' : '';
}

// ask opens the one dialog of the desk and resolves with what build's finish
// was called with, or null when it was left.
export function ask(title, build, look = '') {
  const dialog = $('dialog');
  dialog.className = look;
  const back = document.activeElement;
  $('dialog-title').textContent = title;
  return new Promise((resolve) => {
    let answer = null;
    const finish = (value) => { answer = value; dialog.close(); };
    replace($('dialog-body'), build(finish));
    dialog.onclose = () => { back?.focus?.(); resolve(answer); };
    dialog.showModal();
    dialog.querySelector('[autofocus], input, select, textarea, button')?.focus();
  });
}
