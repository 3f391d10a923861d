// Start: reads the figures inside the page and puts charts and readout in their places.

function start() {
  const run = unpacked(JSON.parse(document.getElementById('figures').textContent));
  const place = document.getElementById('stack');
  if (!run.slices) {
    element('p', '', place, 'No slice was recorded, so there is nothing to draw.');
    return;
  }
  let readout = null;
  const stack = buildStack(run, place, (bin) => readout && say(readout, bin));
  readout = buildReadout(stack, document.getElementById('readout'));
  say(readout, null);
  const redraw = () => {
    layOut(stack);
    colourReadout(readout);
    say(readout, null);
  };
  window.addEventListener('resize', () => {
    if (place.clientWidth !== stack.width) redraw();
  });
  matchMedia('(prefers-color-scheme: dark)').addEventListener('change', redraw);
  let folded = [];
  window.addEventListener('beforeprint', () => {
    document.documentElement.dataset.medium = 'print';
    folded = [...document.querySelectorAll('details:not([open])')];
    folded.forEach((each) => (each.open = true));
    redraw();
  });
  window.addEventListener('afterprint', () => {
    delete document.documentElement.dataset.medium;
    folded.forEach((each) => (each.open = false));
    redraw();
  });
  document.documentElement.dataset.drawn = 'yes';
}

start();
