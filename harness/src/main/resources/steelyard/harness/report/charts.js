// Charts: which there are, their scales, and what is said of each in words.

const QUANTILES = [
  { key: 'worst', name: 'worst', width: 1, dash: [1.5, 2.5], tone: 'soft' },
  { key: 'p99', name: '99 %', width: 1.2, dash: [5, 3], tone: 'ink' },
  { key: 'p95', name: '95 %', width: 1.1, dash: [], tone: 'soft' },
  { key: 'p50', name: '50 %', width: 2.2, dash: [], tone: 'ink' },
];

/** The charts of a run, from top to bottom. */
function chartsOf(run, narrow) {
  const several = run.pools.length > 1;
  const one = run.forecast && run.forecast.grouped ? 'group' : 'backend';
  const of = (pool) => (several ? ` in pool ${pool.name}` : '');
  const rivers = run.pools.map((pool, at) => ({
    title: `${pool.unit === 'connections' ? 'Connections' : 'Attempts'} a second${of(pool)}, by ${one}`,
    note:
      (run.bands ? 'median shares; ' : '') +
      (pool.members.length > 1 ? 'thin lines: where entitled shares would put the edges' : ''),
    height: Math.min(Math.max(several ? 140 : 180, pool.members.length * 24), 300),
    y: linear(),
    series: [{ figure: (bin) => bin.pools[at] }],
    under: riverLayer(pool),
    about: () => backendsAbout(run, pool.members, 'picked', 0, `${pool.unit} a second`),
  }));
  const strips = run.pools.map((pool) => {
    const row = pool.members.length > 16 ? 15 : pool.members.length > 6 ? 17 : 21;
    return {
      title: run.bands ? `Standing in most plays${of(pool)}` : `Standing${of(pool)}`,
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
    ...(run.bands ? bandCharts(run, one) : []),
    ...strips,
    {
      title: 'Latency of good answers, ms, log scale',
      note: run.latencies ? 'quantiles of each step' : 'quantiles of 100 ms slices',
      height: narrow ? 150 : 170,
      y: logarithmic(),
      series: QUANTILES.map((each) => ({ ...each, ...quantileOf(run, each), colour: ink[each.tone] })),
      over: lineNames(QUANTILES.map((each) => each.name)),
      about: () => latencyAbout(run),
    },
    {
      title: 'Failures a second, by cause',
      note: !run.causes.length ? 'no request failed' : run.bands ? 'by due time; means over plays; dotted: 95 % of plays stay below' : 'by due time',
      height: 110,
      empty: !run.causes.length,
      y: linear(),
      series: [
        { figure: (bin) => bin.failedAll },
        ...(run.bands ? [{ figure: (bin) => bin.bands.failed.high }] : []),
      ],
      under: failureLayer(run),
      over: run.bands ? ceilingLayer((bin) => bin.bands.failed.high) : undefined,
      about: () => failuresAbout(run),
    },
    flightChart(run, one),
    {
      title: 'Utilisation of workers, %',
      note: '',
      height: 96,
      y: { ...linear(), range: () => [0, 1], values: (splits) => splits.map((each) => Math.round(each * 100)) },
      series: lines(run, 'utilisation'),
      about: () => backendsAbout(run, run.backends, 'utilisation', 2, 'of 1 busy'),
    },
  ];
  const moving = run.pools.filter((pool) => !pool.byLoad && pool.members.some((each) => each.weight.some((weight) => weight !== each.weight[0])));
  const weights = moving.map((pool) => ({
    title: `Weight in effect${of(pool)}, by ${one}`,
    note: '',
    height: 96,
    y: linear(),
    series: lines(run, 'weight', false, pool.members).map((each) => ({ ...each, stepped: true })),
    about: () => backendsAbout(run, pool.members, 'weight', 2, 'weight'),
  }));
  const byLoad = run.pools.filter((pool) => pool.byLoad).map((pool) => weighChart(run, pool, of(pool), one));
  charts.splice(charts.length - 1, 0, ...weights, ...byLoad);
  return charts;
}

/** What is in flight on backends, and what waits in the balancer until one is free. */
function flightChart(run, one) {
  const several = run.pools.length > 1;
  const queueing = run.pools.filter((pool) => pool.queue);
  const queues = queueing.map((pool) => queueLine(run, pool));
  return {
    title: `In flight${queues.length ? ' and queue' : ''}, by ${one}`,
    note: 'dotted: of these, waiting in the backend’s queue' + (queues.length ? '; dashed: waiting in the balancer' : ''),
    height: 120,
    y: linear(),
    series: [...queues, ...lines(run, 'inFlight'), ...lines(run, 'waiting', true)],
    over: queues.length ? lineNames(queueing.map((pool) => (queues.length > 1 ? pool.name : 'queue'))) : undefined,
    about: () =>
      backendsAbout(run, run.backends, 'inFlight', 1, 'in flight') +
      queueing.map((pool) => `; queue${several ? ` of ${pool.name}` : ''} up to ${plain(most(pool.queue, 0, run.slices), 0)}`).join(''),
  };
}

function queueLine(run, pool) {
  const line = { colour: ink.ink, width: 1.8, dash: [5, 3] };
  const at = run.pools.indexOf(pool);
  if (!run.bands || !run.bands.queues[pool.name]) return { ...line, figure: (bin) => bin.queues[at] };
  return { ...line, ...bandOf((bin) => bin.bands.queues[pool.name]), figure: (bin) => bin.bands.queues[pool.name].median };
}

/** What only a forecast shows: requests and shares, each a line of medians in the band of 90 % of plays. */
function bandCharts(run, one) {
  const requests = [
    { key: 'offered', name: 'offered', width: 1.2, dash: [5, 3], colour: ink.soft },
    { key: 'ok', name: 'ok', width: 1.6, dash: [], colour: ink.ink },
  ];
  const shares = run.backends.map((each) => ({
    ...bandOf((bin) => bin.backends[each.index].bands.share),
    colour: backendColour(each.index),
    width: 1.6,
    dash: backendDash(each.index),
    figure: (bin) => bin.backends[each.index].bands.share.median,
  }));
  return [
    {
      title: `Share of the ${unitOf(run)} of its pool, by ${one}, %`,
      note: 'shaded: 90 % of plays',
      height: 150,
      y: { ...linear(), values: (splits) => splits.map((each) => plain(each * 100, each * 100 < 1 ? 1 : 0).replace("0.0", "0")) },
      series: shares,
      about: () => backendsAbout(run, run.backends, 'share', 3, 'of 1'),
    },
    {
      title: 'Requests a second',
      note: 'shaded: 90 % of plays',
      height: 120,
      y: linear(),
      series: requests.map((each) => ({
        ...bandOf((bin) => bin.bands[each.key]),
        ...each,
        figure: (bin) => bin.bands[each.key].median,
      })),
      over: lineNames(requests.map((each) => each.name)),
      about: () => requests.map((each) => `${each.name} ${plain(figuresOf(run, 0, run.slices)[each.key], 0)}`).join(', '),
    },
  ];
}

/** What is picked for: connections where octets are passed on as they come, everywhere. */
function unitOf(run) {
  return run.pools.every((pool) => pool.unit === 'connections') ? 'connections' : 'attempts';
}

/** The edges of a line's band. */
function bandOf(band) {
  return { low: (bin) => band(bin).low, high: (bin) => band(bin).high };
}

/** A quantile of a slice; in a forecast the median of it over plays, in the band of 90 % of plays. */
function quantileOf(run, quantile) {
  const { key } = quantile;
  if (!run.bands || !run.bands.requests[key]) return { figure: (bin) => bin[key] };
  return { ...bandOf((bin) => bin.bands[key]), figure: (bin) => bin.bands[key].median };
}

/** One line a backend; a light colour on light paper gets a darker edge. */
function lines(run, figure, dotted, members = run.backends) {
  const told = members.filter((each) => !dotted || each[figure].some((value) => value > 0));
  return told.flatMap((each) => {
    const line = {
      ...(run.bands && !dotted ? bandOf((bin) => bin.backends[each.index].bands[figure]) : {}),
      colour: backendColour(each.index),
      width: dotted ? 1.2 : 1.6,
      dash: dotted ? [1.5, 2.5] : backendDash(each.index),
      figure: (bin) => bin.backends[each.index][figure],
    };
    const light = line.colour === '#F0E442' && ink.byDay && !dotted;
    return light ? [{ ...line, low: undefined, colour: ink.soft, width: 3.2 }, line] : [line];
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
  return `over the play${run.latencies ? '' : ', mean of slices'}: 50 % ${millis(all.p50)} ms, 99 % ${millis(all.p99)} ms; worst ${millis(all.worst)} ms`;
}

function failuresAbout(run) {
  if (!run.causes.length) return 'no request failed';
  return run.causes.map((cause) => `${cause} ${total(run.requests.failed[cause], 0, run.slices)}`).join(', ');
}
