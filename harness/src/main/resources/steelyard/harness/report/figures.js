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
    unread: each.unread || [],
  }));
  const pools = raw.pools.map((name) => {
    const members = backends.filter((each) => each.pool === name);
    const picked = new Float64Array(raw.slices);
    for (const member of members) member.picked.forEach((count, at) => (picked[at] += count));
    const unit = (raw.connections || []).includes(name) ? 'connections' : 'attempts';
    const queue = raw.queues && raw.queues[name] && column(raw.queues[name]);
    return { name, members, picked, unit, queue, byLoad: (raw.byLoad || []).includes(name) };
  });
  const bands = raw.bands && {
    requests: unpackedBands(raw.bands.requests),
    backends: raw.bands.backends.map(unpackedBands),
    queues: unpackedBands(raw.bands.queues || {}),
  };
  const latencies = raw.latencies && unpackedLatencies(raw.latencies);
  return { ...raw, requests, backends, pools, bands, latencies, causes: Object.keys(requests.failed) };
}

/** The latencies of all slices as steps and how often each was met; `starts` says where a slice begins. */
function unpackedLatencies(raw) {
  const steps = [];
  const counts = [];
  const starts = [0];
  for (const slice of raw.slices) {
    let step = 0;
    for (const number of slice) {
      if (number < 0) {
        counts[counts.length - 1] = -number;
      } else {
        step += number;
        steps.push(step);
        counts.push(1);
      }
    }
    starts.push(steps.length);
  }
  const most = steps.reduce((best, each) => Math.max(best, each), 0);
  return { bits: raw.bits, steps, counts, starts, met: new Int32Array(most + 1) };
}

/** The end of a step, in milliseconds: steps are even up to 2^bits units of 512 ns, then halve each doubling as often. */
function stepEnd(step, bits) {
  const half = 2 ** (bits - 1);
  const doublings = Math.max(0, Math.floor(step / half) - 1);
  return ((step - doublings * half + 1) * 2 ** doublings * 512 - 1) / 1e6;
}

/** Quantiles, in rising order, of the good answers of the slices [from, to): the smallest that a share is not above. */
function quantilesOf(latencies, from, to, shares) {
  const { steps, counts, starts, met, bits } = latencies;
  const end = starts[Math.min(to, starts.length - 1)];
  let total = 0;
  let low = met.length;
  let high = -1;
  for (let at = starts[Math.min(from, starts.length - 1)]; at < end; at++) {
    met[steps[at]] += counts[at];
    total += counts[at];
    low = Math.min(low, steps[at]);
    high = Math.max(high, steps[at]);
  }
  let step = low;
  let sum = total ? met[low] : 0;
  const found = shares.map((share) => {
    const rank = Math.max(1, Math.ceil(share * total));
    while (step < high && sum < rank) sum += met[++step];
    return total ? stepEnd(step, bits) : NAN;
  });
  met.fill(0, low, high + 1);
  return found;
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

/** Everything that charts and readout say of the slices [from, to): rates a second, means, quantiles. */
function figuresOf(run, from, to) {
  const seconds = (to - from) * run.slice;
  const { requests } = run;
  const failed = run.causes.map((cause) => total(requests.failed[cause], from, to) / seconds);
  const quantiles = run.latencies
    ? quantilesOf(run.latencies, from, to, [0.5, 0.95, 0.99])
    : [requests.p50, requests.p95, requests.p99].map((each) => weighted(each, requests.ok, from, to));
  const figures = {
    from: from * run.slice,
    to: to * run.slice,
    offered: total(requests.offered, from, to) / seconds,
    ok: total(requests.ok, from, to) / seconds,
    retries: total(requests.retries, from, to) / seconds,
    failed,
    failedAll: failed.reduce((sum, each) => sum + each, 0),
    p50: quantiles[0],
    p95: quantiles[1],
    p99: quantiles[2],
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
    queues: run.pools.map((pool) => (pool.queue ? mean(pool.queue, from, to) : 0)),
  };
  if (run.bands) {
    figures.bands = bandsOf(run.bands.requests, from, to, seconds);
    figures.bands.queues = bandsOf(run.bands.queues, from, to);
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
