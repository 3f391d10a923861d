// Readout: the one legend of all charts, with the values at the cursor, or over all that is seen.

const BACKEND_COLUMNS = [
  ['standing', '', 'word'],
  ['attempts', '1/s', 'rate'],
  ['share', '%', 'share'],
  ['entitled', '%', 'entitled'],
  ['in flight', '', 'flight'],
  ['waiting', '', 'waiting'],
  ['busy', '%', 'busy'],
];

function buildReadout(stack, place) {
  const readout = { stack, place, cells: [], causes: [], figures: {} };
  const head = element('p', 'when', place);
  readout.when = element('strong', '', head);
  readout.span = element('span', '', head);
  readout.back = element('button', 'back', head, 'Whole play');
  readout.back.type = 'button';
  readout.back.addEventListener('click', () => look(stack, whole(stack.run)));
  readout.fold = element('button', 'fold', head);
  readout.fold.type = 'button';
  readout.fold.addEventListener('click', () => fold(readout, !place.classList.contains('folded')));
  readout.requests = element('div', 'requests', place);
  readout.standings = element('p', 'standings', place);
  readout.table = element('table', 'backends', place);
  place.tabIndex = 0;
  fold(readout, matchMedia('(max-width: 600px)').matches);
  colourReadout(readout);
  return readout;
}

/** Folded, only the requests are left to see; a narrow page begins so. */
function fold(readout, folded) {
  readout.place.classList.toggle('folded', folded);
  readout.fold.textContent = folded ? 'More' : 'Less';
  readout.fold.setAttribute('aria-expanded', String(!folded));
}

/** Builds its rows; again after the colours changed. */
function colourReadout(readout) {
  readout.requests.replaceChildren();
  readout.table.replaceChildren();
  readout.standings.replaceChildren();
  readout.figures = {};
  const { run } = readout.stack;
  readout.group = element('div', '', readout.requests);
  requestRow(readout, 'offered', '1/s');
  requestRow(readout, 'ok', '1/s');
  if (run.pools.some((pool) => pool.queue)) requestRow(readout, 'queue', '');
  run.causes.forEach((cause, at) => requestRow(readout, cause, '1/s', fillSample(causeFill(at)), 'failure'));
  if (!run.causes.length) requestRow(readout, 'failed', '1/s');
  readout.group = element('div', '', readout.requests);
  for (const each of [...QUANTILES].reverse()) {
    requestRow(readout, each.name, 'ms', lineSample(each.width, each.dash, ink[each.tone]));
  }
  for (const word of standingsOf(run)) {
    const key = element('span', '', readout.standings);
    key.append(fillSample(standingFill(word, null)), word);
  }
  const caption = element('caption', '', readout.table, 'Backends at the cursor');
  caption.className = 'unseen';
  const head = element('tr', '', element('thead', '', readout.table));
  element('th', '', head, 'backend').scope = 'col';
  for (const [name, unit, css] of BACKEND_COLUMNS) {
    const cell = element('th', css, head, name === 'attempts' ? unitOf(run) : name);
    cell.scope = 'col';
    if (unit) element('small', '', cell, ' ' + unit);
  }
  const body = element('tbody', '', readout.table);
  readout.cells = [];
  for (const pool of run.pools) {
    if (run.pools.length > 1) {
      const title = element('th', 'pool', element('tr', '', body), 'pool ' + pool.name);
      title.colSpan = BACKEND_COLUMNS.length + 1;
      title.scope = 'rowgroup';
    }
    pool.members.forEach((member) => backendRow(readout, body, member));
  }
}

function requestRow(readout, name, unit, swatch, css) {
  const item = element('p', css || '', readout.group);
  const label = element('span', 'name', item);
  if (swatch) label.append(swatch);
  label.append(name);
  readout.figures[name] = element('span', 'value', item);
  element('small', '', item, unit);
}

function backendRow(readout, body, member) {
  const row = element('tr', '', body);
  const name = element('th', '', row);
  name.scope = 'row';
  name.append(fillSample(backendFill(member.index)), member.name);
  const cells = {};
  for (const [key, , css] of BACKEND_COLUMNS) cells[key] = element('td', css, row);
  readout.cells[member.index] = cells;
}

/** Says what holds in a bin; with null, over all that is seen. */
function say(readout, bin) {
  const { stack } = readout;
  const { run, view } = stack;
  const from = Math.floor(view.from / run.slice + 1e-6);
  const to = Math.min(Math.ceil(view.to / run.slice - 1e-6), run.slices);
  const figures = bin || figuresOf(run, from, Math.max(to, from));
  const until = seconds(Math.min(view.to, run.played, run.lasts));
  readout.when.textContent = bin ? `At ${seconds(bin.from)} s` : `${seconds(view.from)} s to ${until} s`;
  readout.span.textContent = bin
    ? ` to ${seconds(bin.to)} s`
    : run.latencies
      ? ': means, and quantiles of good answers'
      : ': means over slices';
  readout.back.hidden = !zoomed(stack);
  sayRequests(readout, figures);
  run.backends.forEach((each) => sayBackend(readout.cells[each.index], each, figures, bin));
}

function sayRequests(readout, figures) {
  const { run } = readout.stack;
  const set = (name, text) => (readout.figures[name].textContent = text);
  set('offered', plain(figures.offered, 0));
  set('ok', plain(figures.ok, 0));
  if (run.pools.some((pool) => pool.queue)) set('queue', plain(figures.queues.reduce((sum, each) => sum + each, 0), 1));
  run.causes.forEach((cause, at) => set(cause, plain(figures.failed[at], figures.failed[at] < 10 ? 1 : 0)));
  if (!run.causes.length) set('failed', '0');
  QUANTILES.forEach((each) => set(each.name, millis(figures[each.key])));
}

function sayBackend(cells, backend, figures, bin) {
  const own = figures.backends[backend.index];
  cells.standing.textContent = bin
    ? standingAt(backend, (bin.from + bin.to) / 2)
    : standingIn(backend, figures.from, figures.to);
  cells.attempts.textContent = plain(own.picked, 0);
  cells.share.textContent = percent(own.share);
  cells.entitled.textContent = percent(own.entitled);
  cells['in flight'].textContent = plain(own.inFlight, 1);
  cells.waiting.textContent = plain(own.waiting, 1);
  cells.busy.textContent = percent(own.utilisation);
}
