// Talks to the desk's own server and nothing else. Every write carries the
// token of this page, so that no other page can write.
const token = document.querySelector('meta[name="desk-token"]').content;

export class Refused extends Error {
  constructor(message, status) { super(message); this.status = status; }
}

async function read(answer) {
  const body = await answer.json().catch(() => ({ error: `the desk answered ${answer.status} without saying why` }));
  if (!answer.ok) throw new Refused(body.error ?? String(answer.status), answer.status);
  return body;
}

async function reach(path, options) {
  try {
    return await fetch(path, options);
  } catch {
    throw new Refused('The desk does not answer. Nothing is lost: start "halfspan desk" again and reload this page.', 0);
  }
}

export async function get(path, query = {}) {
  return read(await reach(`/api/${path}?${new URLSearchParams(query)}`));
}

export async function post(path, body = {}) {
  return read(await reach(`/api/${path}`, {
    method: 'POST',
    headers: { 'Content-Type': 'application/json', 'X-Desk-Token': token },
    body: JSON.stringify(body),
  }));
}
