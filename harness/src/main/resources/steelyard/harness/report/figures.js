// Figures: the run's columns, put into bins that a screen can show.

const NAN = Number.NaN;

/** A column as numbers; what is not known is NaN. */
function column(raw) {
  if (Array.isArray(raw)) {
    return Float64Array.from(raw, (value) => (value === null ? NAN : value));
  }
  const runs = raw.runs;
  let size = 0;
  for (let at = 1; at < runs.length; at += 2) size += runs[at];
  const values = new Float64Array(size);
  let start = 0;
  for (let at = 0; at < runs.length; at += 2) {
    values.fill(runs[at] === null ? NAN : runs[at], start, start + runs[at + 1]);
    start += runs[at + 1];
  }
  return values;
}

/** The embedded run with every column unpacked. */
function unpacked(raw) {
  const requests = { failed: {} };
  for (const name of ['offered', 'ok', 'p50', 'p95', 'p99', 'worst', 'retries']) {
    requests[name] = column(raw.requests[name]);
  }
  for (const cause of Object.keys(raw.requests.failed)) {
    requests.failed[cause] = column(raw.requests.failed[cause]);
  }
  const backends = raw.backends.map((each, index) => ({
    index,
    name: each.name,
    pool: each.pool,
    standing: each.standing,
    picked: column(each.picked),
    inFlight: column(each.inFlight),
    waiting: column(each.waiting),
    weight: column(each.weight),
    entitled: column(each.entitled),
    utilisation: column(each.utilisation),
  }));
  const pools = raw.pools.map((name) => {
    const members = backends.filter((each) => each.pool === name);
    const picked = new Float64Array(raw.slices);
    for (const member of members) member.picked.forEach((count, at) => (picked[at] += count));
    return { name, members, picked };
  });
  const bands = raw.bands && {
    requests: unpackedBands(raw.bands.requests),
    backends: raw.bands.backends.map(unpackedBands),
  };
  return { ...raw, requests, backends, pools, bands, causes: Object.keys(requests.failed) };
}

/** The bands of a forecast: of each figure the median and the quantiles that a chart is shaded between. */
function unpackedBands(raw) {
  const bands = {};
  for (const name of Object.keys(raw)) {
    bands[name] = { median: column(raw[name].median), low: column(raw[name].low), high: column(raw[name].high) };
  }
  return bands;
}

/** Means over the slices [from, to) of medians and quantiles; rates a second where `seconds` are given. */
function bandsOf(bands, from, to, seconds) {
  const means = {};
  for (const name of Object.keys(bands)) {
    const scale = seconds && 'offered ok failed'.includes(name) ? (to - from) / seconds : 1;
    means[name] = {
      median: mean(bands[name].median, from, to) * scale,
      low: mean(bands[name].low, from, to) * scale,
      high: mean(bands[name].high, from, to) * scale,
    };
  }
  return means;
}

/** How many slices go into a bin so that a bin is wide enough to be seen. */
function slicesPerBin(visibleSlices, pixels) {
  const least = (visibleSlices * 4) / Math.max(pixels, 1);
  return [1, 2, 5, 10, 20, 50, 100, 200, 500].find((size) => size >= least) || 1000;
}

function total(values, from, to) {
  let sum = 0;
  for (let at = from; at < to; at++) sum += Number.isNaN(values[at]) ? 0 : values[at];
  return sum;
}

function mean(values, from, to) {
  let sum = 0;
  let known = 0;
  for (let at = from; at < to; at++) {
    if (!Number.isNaN(values[at])) {
      sum += values[at];
      known++;
    }
  }
  return known ? sum / known : NAN;
}

function weighted(values, weights, from, to) {
  let sum = 0;
  let weight = 0;
  for (let at = from; at < to; at++) {
    if (!Number.isNaN(values[at])) {
      sum += values[at] * weights[at];
      weight += weights[at];
    }
  }
  return weight ? sum / weight : NAN;
}

function most(values, from, to) {
  let best = NAN;
  for (let at = from; at < to; at++) {
    if (!(values[at] <= best) && !Number.isNaN(values[at])) best = values[at];
  }
  return best;
}

/** Everything that charts and readout say of the slices [from, to): rates a second, means, quantiles of slices. */
function figuresOf(run, from, to) {
  const seconds = (to - from) * run.slice;
  const { requests } = run;
  const failed = run.causes.map((cause) => total(requests.failed[cause], from, to) / seconds);
  const figures = {
    from: from * run.slice,
    to: to * run.slice,
    offered: total(requests.offered, from, to) / seconds,
    ok: total(requests.ok, from, to) / seconds,
    retries: total(requests.retries, from, to) / seconds,
    failed,
    failedAll: failed.reduce((sum, each) => sum + each, 0),
    p50: weighted(requests.p50, requests.ok, from, to),
    p95: weighted(requests.p95, requests.ok, from, to),
    p99: weighted(requests.p99, requests.ok, from, to),
    worst: most(requests.worst, from, to),
    backends: run.backends.map((each) => ({
      picked: total(each.picked, from, to) / seconds,
      inFlight: mean(each.inFlight, from, to),
      waiting: mean(each.waiting, from, to),
      weight: to > from ? each.weight[to - 1] : NAN,
      entitled: mean(each.entitled, from, to),
      utilisation: mean(each.utilisation, from, to),
      due: 0,
      share: NAN,
    })),
    pools: [],
  };
  if (run.bands) {
    figures.bands = bandsOf(run.bands.requests, from, to, seconds);
    figures.backends.forEach((each, at) => (each.bands = bandsOf(run.bands.backends[at], from, to)));
  }
  for (const pool of run.pools) {
    const picked = total(pool.picked, from, to) / seconds;
    for (const member of pool.members) {
      const own = figures.backends[member.index];
      own.share = picked ? own.picked / picked : NAN;
      let due = 0;
      for (let at = from; at < to; at++) due += member.entitled[at] * pool.picked[at];
      own.due = due / seconds;
    }
    figures.pools.push(picked);
  }
  return figures;
}

/** The whole run in bins of so many slices; the last one may be shorter. */
function binned(run, size) {
  const bins = [];
  for (let from = 0; from < run.slices; from += size) {
    bins.push(figuresOf(run, from, Math.min(from + size, run.slices)));
  }
  return bins;
}

/** The standing that a backend had at a second. */
function standingAt(backend, second) {
  let word = '';
  for (const [since, now] of backend.standing) {
    if (since > second) break;
    word = now;
  }
  return word;
}

/** The words for standings that occur, in the order in which they do. */
function standingsOf(run) {
  return [...new Set(run.backends.flatMap((each) => each.standing.map(([, word]) => word)))];
}

/** The standing over a span: its word, or that there were several. */
function standingIn(backend, from, to) {
  const first = standingAt(backend, from);
  const changed = backend.standing.some(([since]) => since > from && since < to);
  return changed ? 'changing' : first;
}

function plain(value, decimals) {
  if (!Number.isFinite(value)) return '–';
  const fixed = Math.abs(value).toFixed(decimals);
  const [whole, part] = fixed.split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+(?!\d))/g, ',');
  return (value < 0 ? '−' : '') + grouped + (part ? '.' + part : '');
}

function percent(share) {
  return plain(share * 100, 1);
}

function seconds(value) {
  return String(Math.round(value * 10) / 10);
}

/** Milliseconds with as many decimals as they are worth. */
function millis(value) {
  return plain(value, value < 10 ? 2 : value < 100 ? 1 : 0);
}
