// Looks at every drawing of the page and says what is wrong with its labels.
const found = [];
let labels = 0;
const letters = 1; // the box of a line is that of the font, a little higher than any of its letters
const boxOf = (e) => {
  const r = e.getBoundingClientRect();
  const upright = e.getAttribute('transform');
  const h = upright ? 0 : letters, w = upright ? letters : 0;
  return {left: r.left + w, right: r.right - w, top: r.top + h, bottom: r.bottom - h, words: e.textContent.slice(0, 60)};
};
const drawings = [...document.querySelectorAll('svg')];
drawings.forEach((svg, n) => {
  const page = svg.getBoundingClientRect();
  const boxes = [...svg.querySelectorAll('text')].map(boxOf);
  labels += boxes.length;
  boxes.forEach((a, i) => {
    if (a.left < page.left || a.right > page.right || a.top < page.top - letters || a.bottom > page.bottom + letters)
      found.push(`${n}: out of the picture: ${a.words}`);
    boxes.slice(0, i).forEach((b) => {
      if (a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom)
        found.push(`${n}: ${a.words} / ${b.words}`);
    });
  });
});
const ids = [...document.querySelectorAll('svg [id]')].map((e) => e.id);
ids.filter((id, i) => ids.indexOf(id) !== i).forEach((id) => found.push(`id ${id} twice`));
const scripts = document.querySelectorAll('script'); // this one; names of rooms look like others
if (scripts.length !== 1) found.push(`${scripts.length} scripts`);
scripts.forEach((e) => e.remove());
found.push(`${drawings.length} drawings, ${labels} labels, ${found.length} wrong`);
document.getElementById('found').textContent = found.join('\n');
