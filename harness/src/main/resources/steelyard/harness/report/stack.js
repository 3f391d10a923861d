// Stack: the charts under one time axis, with one cursor, one zoom and the cues' ticks through all of them.

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
  const row = (figure) => stack.bins.map((bin) => known(figure(bin)));
  return [
    x,
    ...spec.series.map((series) => row(series.figure)),
    ...banded(spec).flatMap((series) => [row(series.high), row(series.low)]),
  ];
}

/** The series that have a band; its edges follow after all series, the upper edge first. */
function banded(spec) {
  return spec.series.filter((series) => series.low);
}

function bandsBetween(spec) {
  const first = spec.series.length + 1;
  return banded(spec).map((series, at) => ({
    series: [first + 2 * at, first + 2 * at + 1],
    fill: veiled(series.colour, 0.22),
  }));
}

function edgesOf(spec) {
  return banded(spec).flatMap((series) => {
    const edge = seriesOf({ ...series, dash: [], width: 0, colour: 'transparent' }, false);
    return [edge, edge].map((each) => ({ ...each }));
  });
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
    series: [{}, ...spec.series.map((series) => seriesOf(series, painted)), ...edgesOf(spec)],
    bands: bandsBetween(spec),
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
