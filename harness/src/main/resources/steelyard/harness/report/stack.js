// Stack: the charts under one time axis, with one cursor, one zoom and the cues' ticks through all of them.

const LABEL_HEIGHT = 18;
const MOST_LABEL_ROWS = 7;
const QUANTILES = [
  { key: 'worst', name: 'worst', width: 1, dash: [1.5, 2.5], tone: 'soft' },
  { key: 'p99', name: '99 %', width: 1.2, dash: [5, 3], tone: 'ink' },
  { key: 'p95', name: '95 %', width: 1.1, dash: [], tone: 'soft' },
  { key: 'p50', name: '50 %', width: 2.2, dash: [], tone: 'ink' },
];

/** The charts of a run, from top to bottom. */
function chartsOf(run, narrow) {
  const several = run.pools.length > 1;
  const of = (pool) => (several ? ` in pool ${pool.name}` : '');
  const rivers = run.pools.map((pool, at) => ({
    title: `Attempts a second${of(pool)}, by backend`,
    note: pool.members.length > 1 ? 'dark lines: where entitled shares would put the edges' : '',
    height: Math.min(Math.max(several ? 140 : 180, pool.members.length * 24), 300),
    y: linear(),
    series: [{ figure: (bin) => bin.pools[at] }],
    under: riverLayer(pool),
    about: () => backendsAbout(run, pool.members, 'picked', 0, 'attempts a second'),
  }));
  const strips = run.pools.map((pool) => {
    const row = pool.members.length > 16 ? 15 : pool.members.length > 6 ? 17 : 21;
    return {
      title: `Standing${of(pool)}`,
      note: '',
      height: pool.members.length * row + 12,
      members: pool.members,
      row,
      series: [],
      under: stripLayer(pool, row, run),
      about: () => pool.members.map((each) => standingAbout(each)).join('; '),
    };
  });
  const charts = [
    ...rivers,
    ...strips,
    {
      title: 'Latency of good answers, ms, log scale',
      note: 'quantiles of 100 ms slices',
      height: narrow ? 150 : 170,
      y: logarithmic(),
      series: QUANTILES.map((each) => ({ ...each, colour: ink[each.tone], figure: (bin) => bin[each.key] })),
      over: lineNames(QUANTILES.map((each) => each.name)),
      about: () => latencyAbout(run),
    },
    {
      title: 'Failures a second, by cause',
      note: run.causes.length ? '' : 'no request failed',
      height: 110,
      empty: !run.causes.length,
      y: linear(),
      series: [{ figure: (bin) => bin.failedAll }],
      under: failureLayer(run),
      about: () => failuresAbout(run),
    },
    {
      title: 'In flight, by backend',
      note: 'dotted: of these, waiting in the backend’s queue',
      height: 120,
      y: linear(),
      series: [...lines(run, 'inFlight'), ...lines(run, 'waiting', true)],
      about: () => backendsAbout(run, run.backends, 'inFlight', 1, 'in flight'),
    },
    {
      title: 'Utilisation of workers, %',
      note: '',
      height: 96,
      y: { ...linear(), range: () => [0, 1], values: (splits) => splits.map((each) => Math.round(each * 100)) },
      series: lines(run, 'utilisation'),
      about: () => backendsAbout(run, run.backends, 'utilisation', 2, 'of 1 busy'),
    },
  ];
  if (run.backends.some((each) => each.weight.some((weight) => weight !== each.weight[0]))) {
    charts.splice(charts.length - 1, 0, {
      title: 'Weight in effect, by backend',
      note: '',
      height: 96,
      y: linear(),
      series: lines(run, 'weight').map((each) => ({ ...each, stepped: true })),
      about: () => backendsAbout(run, run.backends, 'weight', 2, 'weight'),
    });
  }
  return charts;
}

/** One line a backend; a light colour on light paper gets a darker edge. */
function lines(run, figure, dotted) {
  const told = run.backends.filter((each) => !dotted || each[figure].some((value) => value > 0));
  return told.flatMap((each) => {
    const line = {
      colour: backendColour(each.index),
      width: dotted ? 1.2 : 1.6,
      dash: dotted ? [1.5, 2.5] : backendDash(each.index),
      figure: (bin) => bin.backends[each.index][figure],
    };
    const light = line.colour === '#F0E442' && ink.byDay && !dotted;
    return light ? [{ ...line, colour: ink.soft, width: 3.2 }, line] : [line];
  });
}

function linear() {
  return {
    distr: 1,
    range: (low, high) => [0, high > 0 ? high * 1.06 : 1],
    splits: (low, high, pixels) => evenSplits(high, Math.max(2, Math.round(pixels / 45))),
    values: (splits) => splits.map((each) => plain(each, Number.isInteger(each) ? 0 : each < 0.1 ? 2 : 1)),
  };
}

function logarithmic() {
  return {
    distr: 3,
    range: (low, high) => (low > 0 ? [roundDown(low), roundUp(high)] : [1, 100]),
    splits: (low, high, pixels) => logSplits(low, high, pixels),
    values: (splits) => splits.map((each) => (each >= 1 ? plain(each, 0) : String(each))),
  };
}

function evenSplits(high, wanted) {
  const rough = roundUp(high / wanted);
  const step = rough * 2 > high ? roundDown(high / 2) : rough;
  const splits = [];
  for (let at = 0; at * step <= high * 1.0001; at++) splits.push(Number((at * step).toPrecision(10)));
  return splits;
}

function logSplits(low, high, pixels) {
  const decades = Math.log10(high / low);
  const steps = pixels / decades > 70 ? [1, 2, 5] : [1];
  const splits = [];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++) {
    for (const step of steps) {
      const value = Number((step * 10 ** power).toPrecision(3));
      if (value >= low * 0.999 && value <= high * 1.001) splits.push(value);
    }
  }
  return splits;
}

function roundUp(value) {
  const power = 10 ** Math.floor(Math.log10(value));
  const step = [1, 2, 5, 10].find((each) => each * power >= value * 0.9999);
  return Number((step * power).toPrecision(3));
}

function roundDown(value) {
  const power = 10 ** Math.floor(Math.log10(value));
  const step = [5, 2, 1].find((each) => each * power <= value * 1.0001);
  return Number((step * power).toPrecision(3));
}

/** What is said of a chart to those who do not see it; the page's tables hold the figures. */
function backendsAbout(run, members, figure, decimals, unit) {
  run.bySecond = run.bySecond || binned(run, 10);
  return members
    .map((member) => {
      const values = run.bySecond.map((bin) => bin.backends[member.index][figure]).filter(Number.isFinite);
      if (!values.length) return `${member.name} not recorded`;
      const low = plain(Math.min(...values), decimals);
      return `${member.name} ${low} to ${plain(Math.max(...values), decimals)} ${unit}`;
    })
    .join('; ');
}

function standingAbout(backend) {
  return `${backend.name} ${backend.standing.map(([since, word]) => `${word} from ${seconds(since)} s`).join(', ')}`;
}

function latencyAbout(run) {
  const all = figuresOf(run, 0, run.slices);
  return `over the play, mean of slices: 50 % ${millis(all.p50)} ms, 99 % ${millis(all.p99)} ms; worst ${millis(all.worst)} ms`;
}

function failuresAbout(run) {
  if (!run.causes.length) return 'no request failed';
  return run.causes.map((cause) => `${cause} ${total(run.requests.failed[cause], 0, run.slices)}`).join(', ');
}

/** Builds the stack in its place; `onCursor` is told the bin under the cursor, or null. */
function buildStack(run, place, onCursor) {
  const stack = { run, place, onCursor, charts: [], view: whole(run), bins: [], size: 0, at: null };
  stack.step = document.getElementById('step');
  stack.rail = element('div', 'rail', place);
  stack.axis = element('div', 'axis', place);
  stack.body = element('div', 'charts', place);
  stack.ticks = element('div', 'ticks', place);
  stack.ticks.setAttribute('aria-hidden', 'true');
  place.addEventListener('keydown', (event) => onKey(stack, event));
  layOut(stack);
  return stack;
}

function element(tag, css, parent, text) {
  const made = document.createElement(tag);
  if (css) made.className = css;
  if (text !== undefined) made.textContent = text;
  if (parent) parent.append(made);
  return made;
}

function whole(run) {
  return { from: 0, to: Math.max(run.lasts, run.played, run.slice) };
}

function zoomed(stack) {
  const all = whole(stack.run);
  return stack.view.from > all.from || stack.view.to < all.to;
}

/** Draws everything anew: at the start, and after the width, the scheme or the medium changed. */
function layOut(stack) {
  mixInk();
  stack.charts.forEach((chart) => chart.destroy());
  stack.body.replaceChildren();
  stack.width = stack.place.clientWidth;
  const narrow = stack.width < 560;
  stack.labelled = !narrow;
  const names = Math.max(...stack.run.backends.map((each) => textWidth(each.name)), 20);
  stack.gutter = Math.ceil(Math.min(Math.max(names + 30, 46), narrow ? 92 : 150));
  stack.right = narrow ? 10 : Math.ceil(Math.min(Math.max(names + 12, 46), 110));
  stack.inner = stack.width - stack.gutter - stack.right;
  stack.place.style.setProperty('--gutter', stack.gutter + 'px');
  rebin(stack);
  stack.charts = chartsOf(stack.run, narrow).flatMap((spec) => buildChart(stack, spec));
  layRail(stack);
}

function textWidth(text) {
  const draw = document.createElement('canvas').getContext('2d');
  draw.font = ink.font;
  return draw.measureText(text).width;
}

function rebin(stack) {
  const shown = Math.min(stack.view.to, stack.run.played) - stack.view.from;
  const size = slicesPerBin(Math.max(shown, 0) / stack.run.slice, stack.inner);
  if (size !== stack.size) {
    stack.size = size;
    stack.bins = binned(stack.run, size);
  }
}

function dataOf(stack, spec) {
  const known = (value) => (Number.isFinite(value) ? value : null);
  const x = stack.bins.map((bin) => (bin.from + bin.to) / 2);
  return [x, ...spec.series.map((series) => stack.bins.map((bin) => known(series.figure(bin))))];
}

function buildChart(stack, spec) {
  const section = element('section', 'chart', stack.body);
  const heading = element('h3', '', section, spec.title);
  if (spec.note) element('small', '', heading, spec.note);
  if (spec.empty) return [];
  const plot = element('div', 'plot', section);
  plot.setAttribute('role', 'img');
  plot.setAttribute('aria-label', `${spec.title}: ${spec.about()}`);
  if (spec.members) nameStrips(plot, spec);
  const chart = new uPlot(optionsOf(stack, spec), dataOf(stack, spec), plot);
  chart.spec = spec;
  chart.setScale('x', { min: stack.view.from, max: stack.view.to });
  return [chart];
}

function nameStrips(plot, spec) {
  spec.members.forEach((member, at) => {
    const name = element('span', 'strip-name', plot);
    name.append(fillSample(backendFill(member.index)));
    element('span', '', name, member.name);
    name.title = member.name;
    name.style.top = 8 + at * spec.row + 'px';
    name.style.height = spec.row - 2 + 'px';
  });
}

function optionsOf(stack, spec) {
  const painted = Boolean(spec.under);
  return {
    width: stack.width,
    height: spec.height,
    padding: [8, stack.right, 4, spec.y ? 0 : stack.gutter],
    legend: { show: false },
    scales: { x: { time: false }, ...(spec.y ? { y: scaleOf(spec.y) } : {}) },
    axes: [{ show: false }, ...(spec.y ? [axisOf(stack, spec.y)] : [])],
    series: [{}, ...spec.series.map((series) => seriesOf(series, painted))],
    cursor: {
      y: false,
      points: { show: false },
      drag: { x: true, y: false, setScale: false },
      sync: { key: 'play', setSeries: false },
      bind: { dblclick: () => () => (look(stack, whole(stack.run)), null) },
    },
    hooks: {
      drawClear: [(chart) => drawGrid(chart, stack)],
      drawAxes: spec.under ? [(chart) => spec.under(chart, stack)] : [],
      draw: spec.over ? [(chart) => spec.over(chart, stack)] : [],
      setSelect: [(chart) => onSelect(stack, chart)],
      setCursor: [(chart) => onMove(stack, chart)],
    },
  };
}

function scaleOf(y) {
  return { auto: true, distr: y.distr, range: (chart, low, high) => y.range(low, high) };
}

function axisOf(stack, y) {
  return {
    size: stack.gutter,
    gap: 6,
    font: ink.font,
    stroke: () => ink.soft,
    grid: { stroke: () => ink.hair, width: 1 },
    ticks: { show: false },
    splits: (chart, axis, low, high) => y.splits(low, high, chart.bbox.height / (window.devicePixelRatio || 1)),
    values: (chart, splits) => y.values(splits),
    filter: (chart, splits) => splits,
  };
}

function seriesOf(series, painted) {
  return {
    scale: 'y',
    stroke: painted ? 'transparent' : series.colour,
    width: painted ? 0 : series.width,
    dash: series.dash,
    points: { show: false },
    spanGaps: false,
    paths: painted ? () => null : series.stepped ? uPlot.paths.stepped({ align: 1 }) : uPlot.paths.linear(),
  };
}

function drawGrid(chart, stack) {
  framed(chart, (ctx) => {
    ctx.strokeStyle = ink.hair;
    ctx.lineWidth = 1;
    for (const second of timeSplits(stack)) {
      const x = Math.round(xOf(chart, second)) + 0.5;
      strokes(ctx, [x, chart.bbox.top, x, chart.bbox.top + chart.bbox.height]);
    }
  });
}

/** Shows a span of the play in all charts; the whole play when it is wider than that. */
function look(stack, span) {
  const all = whole(stack.run);
  const least = 5 * stack.run.slice;
  const from = Math.max(all.from, Math.min(span.from, all.to - least));
  const to = Math.min(all.to, Math.max(span.to, from + least));
  stack.view = { from, to };
  rebin(stack);
  for (const chart of stack.charts) {
    chart.setData(dataOf(stack, chart.spec), false);
    chart.setScale('x', { min: from, max: to });
  }
  layRail(stack);
  stack.onCursor(null);
}

function onSelect(stack, chart) {
  if (stack.selecting || chart.select.width < 4) return;
  stack.selecting = true;
  const from = chart.posToVal(chart.select.left, 'x');
  const to = chart.posToVal(chart.select.left + chart.select.width, 'x');
  setTimeout(() => {
    for (const each of stack.charts) each.setSelect({ left: 0, top: 0, width: 0, height: 0 }, false);
    stack.selecting = false;
    look(stack, { from, to });
  }, 0);
}

function onMove(stack, chart) {
  if (chart !== stack.charts[0]) return;
  const at = chart.cursor.idx;
  const inside = at !== null && at !== undefined && chart.cursor.left >= 0;
  stack.at = inside ? at : null;
  const bin = inside ? stack.bins[at] : null;
  pointAxis(stack, bin);
  stack.onCursor(bin);
}

function onKey(stack, event) {
  const step = { ArrowLeft: -1, ArrowRight: 1 }[event.key];
  if (event.key === 'Escape') look(stack, whole(stack.run));
  if (!step || !stack.bins.length) return;
  event.preventDefault();
  const next = stack.at === null ? 0 : stack.at + step * (event.shiftKey ? 10 : 1);
  const at = Math.min(Math.max(next, 0), stack.bins.length - 1);
  const bin = stack.bins[at];
  const chart = stack.charts[0];
  chart.setCursor({ left: chart.valToPos((bin.from + bin.to) / 2, 'x'), top: 8 }, true, true);
}

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
  layCues(stack);
  layUnplayed(stack);
}

function layUnplayed(stack) {
  const { run, view } = stack;
  if (run.played >= run.lasts - run.slice / 2 || run.played >= view.to) return;
  const gap = element('div', 'unplayed', stack.ticks);
  const left = pageX(stack, Math.max(run.played, view.from));
  gap.style.left = left + 'px';
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
