package steelyard.browser;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;

/** What holds of a good page in every view: quiet, complete in itself, no wider than its window, readable. */
final class PageLooks {
    static final double LEAST_CONTRAST = 4.5;

    /** Whatever matches one of these may not overlap anything else that matches it. */
    private static final List<String> APART = List.of(
            ".cue, .second, h3",
            "h3, .plot",
            ".strip-name",
            "#readout tr",
            "#readout p",
            "main > *",
            "h1, h2, .verdict, .fitness, .about, .wide");

    private PageLooks() {}

    /** Checks the page that is open. */
    static void assertGood(Chromium browser, int width) {
        assertThat(browser.complaints()).isEmpty();
        assertThat((List<?>) browser.run(PageScripts.REQUESTS)).isEmpty();
        Number wide = (Number) browser.run("return document.documentElement.scrollWidth");
        assertThat(wide.doubleValue()).isLessThanOrEqualTo(width);
        for (String css : APART) {
            assertThat((List<?>) browser.run(PageScripts.OVERLAPS, css)).as(css).isEmpty();
        }
        Number elements = (Number) browser.run("return document.querySelectorAll('main *').length");
        assertThat(elements.intValue()).isGreaterThan(100);
        assertThat((List<?>) browser.run(PageScripts.FAINT_TEXT, LEAST_CONTRAST))
                .isEmpty();
    }
}
