// Weigh: what weights that go by load make of utilisation, one row a backend, so that who trails whom is seen.

/** Less where there are many. */
function weighRow(members) {
  return members.length > 16 ? 24 : members.length > 6 ? 36 : 54;
}

/** The end of the rows' scale for shares: no second of the play has a larger one. */
function shareEnd(run, members) {
  run.bySecond = run.bySecond || binned(run, 10);
  const weight = (bin, each) => (run.bands ? bin.backends[each.index].bands.entitled.high : weightShare(run, bin, each));
  const largest = (bin) => Math.max(...members.map((each) => Math.max(weight(bin, each), pickedShare(run, bin, each) || 0)));
  const most = Math.max(...run.bySecond.map(largest).filter(Number.isFinite), 0.01);
  return Math.min(1, Math.ceil(most * 20) / 20);
}

/** In a forecast the median over plays. */
function weightShare(run, bin, member) {
  const own = bin.backends[member.index];
  return run.bands ? own.bands.entitled.median : own.entitled;
}

function pickedShare(run, bin, member) {
  const own = bin.backends[member.index];
  return run.bands ? own.bands.share.median : own.share;
}

function busyShare(run, bin, member) {
  const own = bin.backends[member.index];
  return run.bands ? own.bands.utilisation.median : own.utilisation;
}

function weighChart(run, pool, of, one) {
  const row = weighRow(pool.members);
  const end = shareEnd(run, pool.members);
  const unread = pool.members.some((each) => each.unread.length) ? '; barred at the top: no fresh reading' : '';
  return {
    title: `Weight over utilisation${of}, by ${one}`,
    note:
      `area: busy, each row 0 to 100 %; lines, each row 0 to ${plain(end * 100, 0)} %: share of the weight (bold), ` +
      `of the ${pool.unit} (thin)${run.bands ? '; shaded: 90 % of plays' : ''}${unread}`,
    height: pool.members.length * row + 12,
    members: pool.members,
    row,
    series: [],
    under: weighLayer(run, pool, row, end),
    about: () =>
      backendsAbout(run, pool.members, 'utilisation', 2, 'of 1 busy') +
      '; ' +
      backendsAbout(run, pool.members, 'entitled', 2, 'of the weight'),
  };
}

function weighLayer(run, pool, rowHeight, end) {
  return (chart, stack) => {
    const bins = visible(stack.bins, stack.view);
    framed(chart, (ctx, dpr) => {
      pool.members.forEach((member, at) => {
        const top = chart.bbox.top + (at * rowHeight + 1) * dpr;
        const row = { top, height: (rowHeight - 5) * dpr, bins, end, dpr };
        weigh(chart, ctx, run, member, row);
      });
    });
  };
}

function weigh(chart, ctx, run, member, row) {
  const busy = (bin) => busyShare(run, bin, member);
  const weight = (bin) => weightShare(run, bin, member) / row.end;
  const picked = (bin) => pickedShare(run, bin, member) / row.end;
  const floor = rowTops(chart, row, () => 0);
  ctx.globalAlpha = 0.55;
  fillBetween(ctx, rowTops(chart, row, busy), floor, backendFill(member.index));
  ctx.globalAlpha = 1;
  if (run.bands) {
    const of = (name) => (bin) => bin.backends[member.index].bands[name];
    between(chart, ctx, row, of('utilisation'), 1, veiled(backendColour(member.index), 0.35));
    between(chart, ctx, row, of('entitled'), row.end, veiled(ink.ink, 0.25));
  }
  ctx.lineJoin = 'bevel';
  stroke(ctx, floor, ink.hair, row.dpr);
  stroke(ctx, rowTops(chart, row, picked), ink.ink, 0.8 * row.dpr);
  stroke(ctx, rowTops(chart, row, weight), ink.paper, 4 * row.dpr);
  stroke(ctx, rowTops(chart, row, weight), ink.ink, 2.2 * row.dpr);
  for (const [from, to] of member.unread) {
    ctx.fillStyle = hatched(ink.paper, 'rising', ink.ink, 1);
    ctx.fillRect(xOf(chart, from), row.top, xOf(chart, to) - xOf(chart, from), 5 * row.dpr);
  }
}

function between(chart, ctx, row, band, end, fill) {
  fillBetween(ctx, rowTops(chart, row, (bin) => band(bin).high / end), rowTops(chart, row, (bin) => band(bin).low / end), fill);
}

/** Steps within a row; what is not known leaves no step, and nothing leaves the row. */
function rowTops(chart, row, share) {
  const points = [];
  for (const bin of row.bins) {
    const y = row.top + row.height * (1 - Math.min(Math.max(share(bin), 0), 1));
    if (Number.isFinite(y)) points.push([xOf(chart, bin.from), y], [xOf(chart, bin.to), y]);
  }
  return points;
}
