// Rail: the time axis, the cues' labels above it, and their ticks through the charts below.

const LABEL_HEIGHT = 18;
const MOST_LABEL_ROWS = 7;

function pageX(stack, second) {
  return stack.gutter + (stack.inner * (second - stack.view.from)) / (stack.view.to - stack.view.from);
}

function timeSplits(stack) {
  const span = stack.view.to - stack.view.from;
  const wanted = Math.max(stack.inner / 76, 2);
  const step = [0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 30, 60, 120, 300, 600].find((each) => span / each <= wanted) || 1200;
  const splits = [];
  for (let at = Math.ceil(stack.view.from / step - 1e-9); at * step <= stack.view.to + 1e-9; at++) {
    splits.push(at * step);
  }
  return splits;
}

/** The cues' labels, the time axis, and the ticks that run down through the charts. */
function layRail(stack) {
  stack.axis.replaceChildren();
  for (const second of timeSplits(stack)) {
    const label = element('span', 'second', stack.axis, `${seconds(second)} s`);
    label.style.left = pageX(stack, second) + 'px';
    if (pageX(stack, second) > stack.width - 16) label.style.transform = 'translateX(-100%)';
  }
  stack.now = element('output', 'now', stack.axis);
  stack.now.hidden = true;
  stack.ticks.replaceChildren();
  stack.rail.replaceChildren();
  stack.step.textContent = `Each step of a line or a stack is ${seconds(stack.size * stack.run.slice)}\u00a0s.`;
  if (stack.run.bands) {
    const { plays } = stack.run.forecast;
    stack.step.textContent += ` Lines are medians over ${plays} plays, shaded bands hold 90\u00a0% of them slice by slice.`;
  }
  layCues(stack);
  layUnplayed(stack);
}

function layUnplayed(stack) {
  const { run, view } = stack;
  if (run.played >= run.lasts - run.slice / 2 || run.played >= view.to) return;
  const gap = element('div', 'unplayed', stack.ticks);
  const left = pageX(stack, Math.max(run.played, view.from));
  gap.style.left = left + 'px';
  if (stack.labelled) gap.classList.add('named');
  gap.style.width = stack.gutter + stack.inner - left + 'px';
  const words = element('span', '', gap, 'not played');
  words.style.top = stack.charts[0].root.getBoundingClientRect().top - stack.place.getBoundingClientRect().top + 12 + 'px';
}

function layCues(stack) {
  const seen = stack.run.cues
    .map((cue, at) => ({ cue, number: at + 1, x: pageX(stack, cue.at) }))
    .filter((each) => each.x >= stack.gutter - 0.5 && each.x <= stack.gutter + stack.inner + 0.5);
  const word = (each) => each.cue.cue;
  const number = (each) => String(each.number);
  const placed =
    placeCues(stack, seen, word, rowBelow) || placeCues(stack, seen, word, rowFree) || placeCues(stack, seen, number, rowFree, true);
  stack.rail.style.height = placed.rows * LABEL_HEIGHT + 'px';
  stack.rail.hidden = !seen.length;
  for (const { mark, x, row, bounds } of placed.marks) {
    mark.style.left = bounds.left + 'px';
    mark.style.top = row * LABEL_HEIGHT + 'px';
    const tick = element('div', 'tick', stack.ticks);
    tick.style.left = x + 'px';
    tick.style.top = row * LABEL_HEIGHT + 'px';
  }
}

/** Below every label that it would touch, so that ticks pass no words. */
function rowBelow(touched) {
  return touched.length ? Math.max(...touched.map((other) => other.row)) + 1 : 0;
}

/** The first row in which it touches none; a tick may then pass behind a label. */
function rowFree(touched) {
  let row = 0;
  while (touched.some((other) => other.row === row)) row++;
  return row;
}

/** Rows for labels so that none covers another, or null when that takes too many rows and `force` is not set. */
function placeCues(stack, seen, wordOf, rowOf, force) {
  stack.rail.replaceChildren();
  const marks = seen.map((each) => {
    const mark = element('button', 'cue', stack.rail, wordOf(each));
    mark.type = 'button';
    mark.title = `${each.cue.cue}: ${each.cue.action}, applied at ${plain(each.cue.at, 3)} s; press to look closer`;
    mark.addEventListener('click', () => look(stack, { from: each.cue.at - 3, to: each.cue.at + 9 }));
    return { mark, x: each.x };
  });
  let rows = 0;
  const taken = [];
  for (const each of marks) {
    const width = each.mark.offsetWidth + 6;
    const left = Math.max(0, Math.min(each.x, stack.width - width));
    each.bounds = { left, right: left + width };
    each.row = rowOf(taken.filter((other) => other.bounds.right > left && other.bounds.left < each.bounds.right));
    taken.push(each);
    rows = Math.max(rows, each.row + 1);
  }
  return rows > MOST_LABEL_ROWS && !force ? null : { marks, rows };
}

function pointAxis(stack, bin) {
  stack.now.hidden = !bin;
  if (!bin) return;
  stack.now.textContent = `${seconds(bin.from)} s`;
  stack.now.style.left = pageX(stack, (bin.from + bin.to) / 2) + 'px';
}
