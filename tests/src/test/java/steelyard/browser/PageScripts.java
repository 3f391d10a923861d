package steelyard.browser;

/** What a test asks of a page, as scripts that run in it. */
final class PageScripts {
    /** Pairs of elements (one selector) whose boxes overlap by more than a pixel, as words. */
    static final String OVERLAPS = """
            const boxes = [...document.querySelectorAll(arguments[0])]
                .filter(each => each.checkVisibility())
                .map(each => ({each, box: each.getBoundingClientRect()}))
                .filter(({box}) => box.width > 0 && box.height > 0);
            const found = [];
            boxes.forEach((a, at) => boxes.slice(at + 1).forEach(b => {
              const wide = Math.min(a.box.right, b.box.right) - Math.max(a.box.left, b.box.left);
              const high = Math.min(a.box.bottom, b.box.bottom) - Math.max(a.box.top, b.box.top);
              if (wide > 1 && high > 1) found.push(a.each.textContent + ' | ' + b.each.textContent);
            }));
            return found;
            """;

    /** Text whose contrast with what lies under it (WCAG 2.2, relative luminance) is below a ratio. */
    static final String FAINT_TEXT = """
            const least = arguments[0];
            const parts = colour => colour.match(/[\\d.]+/g).map(Number);
            const light = ([r, g, b]) => [r, g, b].map(each => each / 255)
                .map(each => each <= 0.04045 ? each / 12.92 : ((each + 0.055) / 1.055) ** 2.4)
                .reduce((sum, each, at) => sum + each * [0.2126, 0.7152, 0.0722][at], 0);
            const ground = element => {
              for (let at = element; at; at = at.parentElement) {
                const colour = parts(getComputedStyle(at).backgroundColor);
                if (colour.length === 3 || colour[3] > 0) return colour;
              }
              return [255, 255, 255];
            };
            return [...document.querySelectorAll('main *')]
                .filter(each => [...each.childNodes].some(node => node.nodeType === 3 && node.data.trim()))
                .map(each => {
                  const [a, b] = [light(parts(getComputedStyle(each).color)), light(ground(each))];
                  return {each, ratio: (Math.max(a, b) + 0.05) / (Math.min(a, b) + 0.05)};
                })
                .filter(({ratio}) => ratio < least)
                .map(({each, ratio}) => each.textContent + ' ' + ratio.toFixed(2));
            """;

    /** For each chart with a scale: how many pixels left of its frame are painted, which are the scale's numbers. */
    static final String GUTTER_INK = """
            return [...document.querySelectorAll('.plot')].filter(plot => !plot.querySelector('.strip-name')).map(plot => {
              const canvas = plot.querySelector('.u-wrap canvas');
              const frame = plot.querySelector('.u-over');
              const width = Math.round(parseFloat(frame.style.left) * devicePixelRatio) - 2;
              const data = canvas.getContext('2d').getImageData(0, 0, width, canvas.height).data;
              let painted = 0;
              for (let at = 3; at < data.length; at += 4) if (data[at] > 100) painted++;
              return painted;
            });
            """;

    /** What the page has asked for besides itself. */
    static final String REQUESTS = "return performance.getEntriesByType('resource').map(each => each.name)"
            + ".filter(name => !name.startsWith('data:'))";

    static final String SECONDS = "return [...document.querySelectorAll('.second')].map(each => each.textContent)";

    static final String PICTURES =
            "return [...document.querySelectorAll('.u-wrap canvas')].map(each => each.toDataURL())";

    private PageScripts() {}
}
