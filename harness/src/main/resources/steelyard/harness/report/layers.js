// Layers: what is painted inside a chart's frame. Each layer is told the chart and the stack's bins.

/** Runs a painter inside the chart's frame, in device pixels. */
function framed(chart, paint) {
  const { ctx, bbox } = chart;
  ctx.save();
  ctx.setLineDash([]);
  ctx.beginPath();
  ctx.rect(bbox.left, bbox.top, bbox.width, bbox.height);
  ctx.clip();
  paint(ctx, window.devicePixelRatio || 1);
  ctx.restore();
}

function xOf(chart, second) {
  return chart.valToPos(second, 'x', true);
}

function yOf(chart, value) {
  return chart.valToPos(value, 'y', true);
}

/** The bins that can be seen. */
function visible(bins, view) {
  return bins.filter((bin) => bin.to > view.from && bin.from < view.to);
}

/** A path along the tops of steps, from left to right. */
function stepTops(chart, bins, height) {
  const points = [];
  for (const bin of bins) {
    const y = yOf(chart, height(bin));
    points.push([xOf(chart, bin.from), y], [xOf(chart, bin.to), y]);
  }
  return points;
}

function trace(ctx, points) {
  points.forEach(([x, y], at) => (at ? ctx.lineTo(x, y) : ctx.moveTo(x, y)));
}

function fillBetween(ctx, tops, bottoms, fill) {
  ctx.beginPath();
  trace(ctx, tops);
  for (let at = bottoms.length - 1; at >= 0; at--) ctx.lineTo(bottoms[at][0], bottoms[at][1]);
  ctx.closePath();
  ctx.fillStyle = fill;
  ctx.fill();
}

/** Attempts stacked by backend, the first of the list on top, and where the entitled shares would put the edges. */
function riverLayer(pool) {
  const above = (figure) => {
    const edges = [(bin) => sumOf(bin, pool.members, figure)];
    pool.members.forEach((_, at) => edges.push((bin) => sumOf(bin, pool.members.slice(at + 1), figure)));
    return edges;
  };
  const edges = above('picked');
  const entitled = above('due').slice(1, -1);
  return (chart, stack) => {
    const bins = visible(stack.bins, stack.view);
    if (!bins.length) return;
    framed(chart, (ctx, dpr) => {
      const tops = edges.map((edge) => stepTops(chart, bins, edge));
      pool.members.forEach((member, at) => fillBetween(ctx, tops[at], tops[at + 1], backendFill(member.index)));
      ctx.lineJoin = 'bevel';
      const slim = pool.members.length > 16 ? 0.4 : pool.members.length > 6 ? 0.75 : 1;
      for (const edge of entitled) {
        const points = stepTops(chart, bins, edge);
        stroke(ctx, points, ink.paper, 3.2 * slim * dpr);
        stroke(ctx, points, ink.ink, 1.2 * slim * dpr);
      }
    });
    nameBands(chart, pool, edges, bins[bins.length - 1], stack);
  };
}

function sumOf(bin, members, figure) {
  let sum = 0;
  for (const member of members) sum += bin.backends[member.index][figure];
  return sum;
}

function stroke(ctx, points, colour, width) {
  ctx.beginPath();
  trace(ctx, points);
  ctx.strokeStyle = colour;
  ctx.lineWidth = width;
  ctx.stroke();
}

/** Names beside the bands where they end, when there is room. */
function nameBands(chart, pool, edges, bin, stack) {
  if (!stack.labelled) return;
  const dpr = window.devicePixelRatio || 1;
  pool.members.forEach((member, at) => {
    const top = yOf(chart, edges[at](bin));
    const bottom = yOf(chart, edges[at + 1](bin));
    if (bottom - top >= 11 * dpr) sideLabel(chart, member.name, (top + bottom) / 2, beside(chart, stack));
  });
}

/** Where the drawing ends: at the frame, or where the play was broken off. In pixels of the page. */
function beside(chart, stack) {
  const dpr = window.devicePixelRatio || 1;
  const frame = chart.bbox.left + chart.bbox.width;
  return Math.min(frame, xOf(chart, Math.max(stack.run.played, stack.view.from))) / dpr + 6;
}

function sideLabel(chart, text, y, left) {
  const { ctx } = chart;
  const dpr = window.devicePixelRatio || 1;
  ctx.save();
  ctx.scale(dpr, dpr);
  ctx.font = ink.font;
  ctx.fillStyle = ink.ink;
  ctx.textAlign = 'left';
  ctx.textBaseline = 'middle';
  const shown = shortened(ctx, text, chart.width - left);
  ctx.lineJoin = 'round';
  ctx.lineWidth = 4;
  ctx.strokeStyle = ink.paper;
  ctx.strokeText(shown, left, y / dpr);
  ctx.fillText(shown, left, y / dpr);
  ctx.restore();
}

function shortened(ctx, text, room) {
  let kept = text;
  while (kept.length > 1 && ctx.measureText(kept).width > room) kept = kept.slice(0, -2) + '…';
  return kept;
}

/** Failures stacked by cause. */
function failureLayer(run) {
  return (chart, stack) => {
    const bins = visible(stack.bins, stack.view);
    framed(chart, (ctx) => {
      run.causes.forEach((_, cause) => {
        ctx.fillStyle = causeFill(cause);
        ctx.strokeStyle = ink.failure;
        for (const bin of bins) failureBlock(chart, ctx, bin, cause);
      });
    });
  };
}

/** A dotted line along the tops of steps. */
function ceilingLayer(height) {
  return (chart, stack) => {
    const bins = visible(stack.bins, stack.view);
    framed(chart, (ctx, dpr) => {
      ctx.setLineDash([1.5 * dpr, 2.5 * dpr]);
      stroke(ctx, stepTops(chart, bins, height), ink.ink, 1.2 * dpr);
    });
  };
}

function failureBlock(chart, ctx, bin, cause) {
  if (!bin.failed[cause]) return;
  let base = 0;
  for (let below = 0; below < cause; below++) base += bin.failed[below];
  const left = xOf(chart, bin.from);
  const top = yOf(chart, base + bin.failed[cause]);
  const width = Math.max(xOf(chart, bin.to) - left, 1);
  const height = yOf(chart, base) - top;
  ctx.fillRect(left, top, width, height);
  ctx.lineWidth = 1;
  ctx.strokeRect(left + 0.5, top + 0.5, Math.max(width - 1, 1), height);
}

/** One strip a backend; each standing filled in its own way, with its word where it fits. */
function stripLayer(pool, rowHeight, run) {
  return (chart, stack) => {
    const dpr = window.devicePixelRatio || 1;
    framed(chart, (ctx) => {
      pool.members.forEach((member, row) => {
        const top = chart.bbox.top + row * rowHeight * dpr;
        spans(member, run.played).forEach((span) => {
          if (span.to > stack.view.from && span.from < stack.view.to) {
            strip(chart, ctx, span, member.index, top + dpr, (rowHeight - 3) * dpr, dpr);
          }
        });
      });
    });
  };
}

function spans(backend, played) {
  return backend.standing.map(([from, word], at) => ({
    from,
    word,
    to: at + 1 < backend.standing.length ? backend.standing[at + 1][0] : played,
  }));
}

function strip(chart, ctx, span, index, top, height, dpr) {
  const frame = chart.bbox;
  const left = Math.max(xOf(chart, span.from), frame.left);
  const right = Math.min(xOf(chart, span.to), frame.left + frame.width);
  ctx.fillStyle = standingFill(span.word, index);
  ctx.fillRect(left, top, right - left, height);
  ctx.strokeStyle = ink.soft;
  ctx.lineWidth = 1;
  ctx.strokeRect(left + 0.5, top + 0.5, Math.max(right - left - 1, 0.5), height - 1);
  ctx.font = ink.font.replace('11px', Math.min(11, height / dpr - 2) * dpr + 'px');
  const wide = ctx.measureText(span.word).width;
  if (right - left < wide + 8 * dpr) return;
  ctx.fillStyle = ink.paper;
  ctx.fillRect(left + 3 * dpr, top + dpr, wide + 4 * dpr, height - 2 * dpr);
  ctx.fillStyle = ink.ink;
  ctx.textBaseline = 'middle';
  ctx.textAlign = 'left';
  ctx.fillText(span.word, left + 5 * dpr, top + height / 2 + 0.5 * dpr);
}

/** Names beside lines where they end, moved apart where they would meet. */
function lineNames(names) {
  return (chart, stack) => {
    if (!stack.labelled) return;
    const dpr = window.devicePixelRatio || 1;
    const ends = [];
    names.forEach((name, at) => {
      const values = lastKnown(chart.data[at + 1], chart.data[0], stack.view.to);
      const sum = values.reduce((height, value) => height + yOf(chart, value), 0);
      if (values.length) ends.push({ name, y: sum / values.length });
    });
    ends.sort((a, b) => a.y - b.y);
    for (let at = 1; at < ends.length; at++) ends[at].y = Math.max(ends[at].y, ends[at - 1].y + 12 * dpr);
    pushUp(ends, chart.bbox.top + chart.bbox.height, 12 * dpr);
    const left = beside(chart, stack);
    ends.forEach((end) => sideLabel(chart, end.name, end.y, left));
  };
}

function pushUp(ends, limit, apart) {
  let below = limit + apart;
  for (let at = ends.length - 1; at >= 0; at--) {
    ends[at].y = Math.min(ends[at].y, below - apart);
    below = ends[at].y;
  }
}

/** The last few values: the very last alone may be of a slice that was cut short. */
function lastKnown(values, xs, until) {
  const known = [];
  for (let at = values.length - 1; at >= 0 && known.length < 5; at--) {
    if (xs[at] <= until && Number.isFinite(values[at])) known.push(values[at]);
  }
  return known;
}
