// What: the page that shows all pictures, one row a screen, one column a look. Must not: need anything but the pictures.
const escaped = (text) => text.replace(/[&<>"]/g, (sign) => `&#${sign.charCodeAt(0)};`);

const style = `
  body { margin: 2rem; background: #f5f1e8; color: #1b2422; font: 16px/1.4 'Atkinson Hyperlegible', system-ui, sans-serif; }
  h2 { margin: 3rem 0 1rem; text-transform: capitalize; }
  nav a { margin-inline-end: 1rem; color: #0d5759; }
  section { display: grid; grid-template-columns: 1fr 1fr 3fr 3fr; gap: 1rem; align-items: start; margin-block-end: 2rem; }
  h3 { grid-column: 1 / -1; margin: 0; font-weight: 400; }
  figure { margin: 0; }
  img { width: 100%; border: 1px solid #d8d0c0; border-radius: 6px; display: block; }
  figcaption { color: #59645f; font-size: 14px; }
  .fault { color: #9e2f1b; overflow-wrap: anywhere; }`;

function row(pictures) {
  const figures = pictures.map(
    ({
      file,
      width,
      mode,
      faults,
    }) => `<figure><a href="${escaped(file)}"><img loading="lazy" src="${escaped(file)}" alt=""></a>
      <figcaption>${width}, ${mode}${faults.map((fault) => `<div class="fault">${escaped(fault)}</div>`).join('')}</figcaption></figure>`,
  );
  return `<section><h3>${escaped(pictures[0].name)}</h3>${figures.join('')}</section>`;
}

function groupBy(list, keyOf) {
  const groups = new Map();
  for (const one of list) groups.set(keyOf(one), [...(groups.get(keyOf(one)) ?? []), one]);
  return groups;
}

export function contactSheet(pictures) {
  const roles = groupBy(pictures, ({ role }) => role);
  const links = [...roles.keys()].map((role) => `<a href="#${role}">${role}</a>`).join('');
  const parts = [...roles].map(([role, own]) => {
    const rows = [...groupBy(own, ({ name }) => name).values()].map(row).join('');
    return `<h2 id="${role}">${role}</h2>${rows}`;
  });
  return `<!doctype html><html lang="en"><meta charset="utf-8"><title>Rampwell, every screen</title><style>${style}</style>
    <h1>Rampwell, every screen</h1><nav>${links}</nav>${parts.join('')}</html>`;
}
