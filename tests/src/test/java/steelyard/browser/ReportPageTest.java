package steelyard.browser;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;
import org.assertj.core.api.InstanceOfAssertFactories;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;
import org.openqa.selenium.By;
import org.openqa.selenium.Keys;
import org.openqa.selenium.WebElement;
import org.openqa.selenium.interactions.Actions;
import steelyard.harness.report.Report;

/** The report as a person sees it: at a desk and on a phone, by day and by night. */
class ReportPageTest {
    private static final int DESK = 1400;
    private static final int PHONE = 390;
    private static final int TABLET = 800;
    private static final long MOST_BYTES = 1_500_000;

    @TempDir
    private static @Nullable Path folder;

    private static final Map<String, Path> PAGES = new LinkedHashMap<>();
    private static @Nullable Chromium browser;

    @BeforeAll
    static void openBrowser() throws IOException {
        browser = Chromium.start();
        for (Map.Entry<String, InventedRun> run : InventedRuns.all().entrySet()) {
            PAGES.put(run.getKey(), Report.write(run.getValue().write(folder.resolve(run.getKey()))));
        }
    }

    @AfterAll
    static void closeBrowser() throws IOException {
        if (browser != null) {
            browser.close();
        }
    }

    static Stream<Arguments> everyView() {
        return InventedRuns.all().keySet().stream()
                .flatMap(run -> Stream.of(DESK, TABLET, PHONE)
                        .flatMap(width -> Stream.of("light", "dark").map(scheme -> Arguments.of(run, width, scheme))));
    }

    static Stream<String> everyRun() {
        return InventedRuns.all().keySet().stream();
    }

    private static void open(String run, int width, String scheme) {
        browser.open(PAGES.get(run), width, scheme);
        assertThat(browser.run("return document.documentElement.dataset.drawn")).isEqualTo("yes");
    }

    private static double number(String script, Object... arguments) {
        return ((Number) browser.run(script, arguments)).doubleValue();
    }

    private static List<?> list(String script, Object... arguments) {
        return (List<?>) browser.run(script, arguments);
    }

    private static WebElement find(String css) {
        return browser.driver().findElement(By.cssSelector(css));
    }

    @ParameterizedTest
    @MethodSource("everyView")
    void page_inEveryView_isQuietFitsAndReads(String run, int width, String scheme) {
        open(run, width, scheme);

        PageLooks.assertGood(browser, width);
    }

    @Test
    void looks_atAPageWithFaults_findThem() throws IOException {
        Path faulty = Files.writeString(folder.resolve("faulty.html"), """
                <!doctype html><link rel="icon" href="data:,"><body style="background: #fff"><main>
                <p class="cue" style="margin: 0; color: #999">one</p><p class="cue" style="margin: -9px 0 0">two</p>
                <div style="width: 2000px">wide</div></main><script>missing()</script>
                """);
        browser.open(faulty, DESK, "light");

        assertThat(list(PageScripts.OVERLAPS, ".cue")).isEqualTo(List.of("one | two"));
        assertThat(list(PageScripts.FAINT_TEXT, PageLooks.LEAST_CONTRAST)).isEqualTo(List.of("one 2.85"));
        assertThat(number("return document.documentElement.scrollWidth")).isGreaterThan(DESK);
        assertThat(browser.complaints()).hasSize(1);
    }

    @ParameterizedTest
    @MethodSource("everyRun")
    void charts_ofEveryRun_haveTitlesAndAxes(String run) {
        open(run, DESK, "light");

        assertThat(list("return [...document.querySelectorAll('h3')].map(each => each.textContent)"))
                .anySatisfy(title -> assertThat((String) title).startsWith("Attempts a second"))
                .anySatisfy(title -> assertThat((String) title).startsWith("Standing"))
                .anySatisfy(title -> assertThat((String) title).contains("ms, log scale"))
                .anySatisfy(title -> assertThat((String) title).startsWith("Failures a second"))
                .anySatisfy(title -> assertThat((String) title).startsWith("In flight"))
                .anySatisfy(title -> assertThat((String) title).startsWith("Utilisation of workers, %"));
        assertThat(list("return [...document.querySelectorAll('.second')].map(each => each.textContent)"))
                .hasSizeGreaterThan(4)
                .allSatisfy(label -> assertThat((String) label).endsWith(" s"));
        assertThat(list(PageScripts.GUTTER_INK))
                .isNotEmpty()
                .allSatisfy(ink -> assertThat((Long) ink).isGreaterThan(20));
        assertThat(list("return [...document.querySelectorAll('.plot')].map(each => each.ariaLabel)"))
                .allSatisfy(about -> assertThat((String) about).contains(": "));
    }

    @Test
    void byLoad_ofARun_hasItsChartItsQueueAndItsReadings() {
        open("by-load", DESK, "light");

        assertThat(list("return [...document.querySelectorAll('h3')].map(each => each.firstChild.textContent)"))
                .asInstanceOf(InstanceOfAssertFactories.list(String.class))
                .contains(
                        "Attempts a second in pool seats, by backend",
                        "Connections a second in pool mail, by backend",
                        "In flight and queue, by backend",
                        "Weight over utilisation in pool seats, by backend")
                .noneMatch(title -> title.startsWith("Weight in effect in pool seats"));
        assertThat(browser.driver().getPageSource()).contains("barred at the top: no fresh reading");
        assertThat(find(".readings tbody tr").getText()).isEqualTo("gannet 2 22.400 43.300 7.8");
        assertThat(find("#readout .requests").getText()).containsPattern("queue\\s+[0-9]+\\.[0-9]");
        assertThat(find("#readout .standings").getText()).contains("benched");
    }

    @Test
    void weights_ofARunThatSetsThem_keepTheChartOfTheirOwn() {
        open("two-pools", DESK, "light");

        assertThat(list("return [...document.querySelectorAll('h3')].map(each => each.firstChild.textContent)"))
                .asInstanceOf(InstanceOfAssertFactories.list(String.class))
                .contains("Weight in effect in pool seats, by backend", "In flight, by backend")
                .noneMatch(title -> title.startsWith("Weight over"));
        assertThat(browser.driver().findElements(By.cssSelector(".readings"))).isEmpty();
    }

    @Test
    void expectations_ofARun_allHaveARow() {
        open("failures", PHONE, "light");

        List<WebElement> rows = browser.driver().findElements(By.cssSelector("#expectations tbody tr"));
        assertThat(rows).hasSize(3);
        assertThat(rows.get(0).getText()).contains("failed, from 14.9 s to 20 s", "at most 0.3 %", "17.2 %");
        assertThat(rows.get(0).getText()).contains("not met: above the bound");
        assertThat(rows.get(1).getText()).contains("fulmar", "not met: never detected");
        assertThat(rows.get(2).getText()).contains("96.4 ms", "met");
        assertThat(find(".verdict").getText()).startsWith("Not met: 2 of 3");
    }

    @Test
    void cues_ofARun_haveALabelAndATickThroughAllCharts() {
        open("lose-one", DESK, "light");

        assertThat(list("return [...document.querySelectorAll('.cue')].map(each => each.textContent)"))
                .isEqualTo(List.of("fulmar dies", "fulmar returns"));
        double lowest = number("return Math.max(...[...document.querySelectorAll('.plot')]"
                + ".map(each => each.getBoundingClientRect().bottom))");
        assertThat(
                        list(
                                "return [...document.querySelectorAll('.tick')].map(each => each.getBoundingClientRect().bottom)"))
                .hasSize(2)
                .allSatisfy(
                        bottom -> assertThat(((Number) bottom).doubleValue()).isGreaterThanOrEqualTo(lowest - 1));
    }

    @ParameterizedTest
    @MethodSource("everyRun")
    void cursor_overOneChart_movesInAllAndFillsTheReadout(String run) {
        open(run, DESK, "light");
        String before = find("#readout").getText();
        WebElement over = find(".u-over");

        new Actions(browser.driver()).moveToElement(over, -120, 10).perform();

        assertThat(find("#readout .when").getText()).startsWith("At ");
        assertThat(find("#readout").getText()).isNotEqualTo(before);
        assertThat(find(".now").isDisplayed()).isTrue();
        assertThat(
                        list(
                                "return [...new Set([...document.querySelectorAll('.u-cursor-x')].map(each => each.style.transform))]"))
                .hasSize(1);
        assertThat(number("return document.querySelectorAll('.u-cursor-x').length"))
                .isGreaterThan(4);
    }

    @Test
    void readout_whileABackendIsDead_saysWhatHolds() {
        open("lose-one", DESK, "light");
        WebElement over = find(".u-over");
        int width = over.getSize().getWidth();

        new Actions(browser.driver())
                .moveToElement(over, (int) (width * (25.2 / 60 - 0.5)), 10)
                .perform();

        assertThat(find("#readout .when").getText()).isEqualTo("At 25 s to 25.5 s");
        assertThat(find("#readout tbody tr").getText()).startsWith("fulmar down 0 0.0 0.0");
    }

    @Test
    void arrows_onTheCharts_moveTheCursor() {
        open("lose-one", DESK, "light");

        find("#stack").sendKeys(Keys.ARROW_RIGHT, Keys.ARROW_RIGHT, Keys.ARROW_RIGHT);

        assertThat(find("#readout .when").getText()).isEqualTo("At 1 s to 1.5 s");
    }

    @Test
    void drag_acrossAChart_looksCloserInAllAndDoubleClickGoesBack() {
        open("lose-one", DESK, "light");
        List<?> whole = list(PageScripts.PICTURES);
        List<?> seconds = list(PageScripts.SECONDS);
        WebElement over =
                browser.driver().findElements(By.cssSelector(".u-over")).get(2);

        new Actions(browser.driver())
                .moveToElement(over, -200, 10)
                .clickAndHold()
                .moveByOffset(150, 0)
                .release()
                .perform();
        settle();

        assertThat(list(PageScripts.SECONDS)).isNotEqualTo(seconds);
        List<?> closer = list(PageScripts.PICTURES);
        for (int chart = 0; chart < whole.size(); chart++) {
            assertThat(closer.get(chart)).as("chart %d", chart).isNotEqualTo(whole.get(chart));
        }
        assertThat(find(".back").isDisplayed()).isTrue();

        new Actions(browser.driver()).moveToElement(over, 0, 10).doubleClick().perform();
        settle();

        assertThat(list(PageScripts.SECONDS)).isEqualTo(seconds);
        assertThat(list(PageScripts.PICTURES)).isEqualTo(whole);
        assertThat(find(".back").isDisplayed()).isFalse();
    }

    @Test
    void cue_pressed_looksCloser() {
        open("lose-one", PHONE, "light");

        browser.run("document.querySelector('.cue').click()");
        settle();

        assertThat(find("#readout .when").getText()).startsWith("12 s to 24 s: means");
    }

    @Test
    void readout_onAPhone_beginsFoldedAndNeverCoversMuch() {
        open("two-pools", PHONE, "light");
        String share = "return document.querySelector('#readout').getBoundingClientRect().height / innerHeight";

        assertThat(find("#readout .backends").isDisplayed()).isFalse();
        assertThat(number(share)).isLessThan(0.2);

        browser.run("document.querySelector('.fold').click()");
        assertThat(find("#readout .backends").isDisplayed()).isTrue();
        assertThat(find(".fold").getText()).isEqualTo("Less");
        assertThat(number(share)).isLessThan(0.23);
    }

    @Test
    void weights_ofTwoPools_haveAChartEach() {
        open("two-pools", DESK, "dark");

        assertThat(list("return [...document.querySelectorAll('h3')].map(each => each.textContent)"))
                .asString()
                .contains("Weight in effect in pool seats, by backend", "Weight in effect in pool berths, by backend")
                .doesNotContain("dark lines");
    }

    /** Charts paint in the next frames. */
    private static void settle() {
        browser.run("return new Promise(done => setTimeout(() => requestAnimationFrame(() =>"
                + " requestAnimationFrame(() => done(1))), 50))");
    }

    @Test
    void run_interrupted_saysSoAndShowsWhatWasNotPlayed() {
        open("interrupted", DESK, "light");

        assertThat(find(".verdict").getText()).isEqualTo("No verdict: the play was interrupted at 23.4 s of 60 s.");
        assertThat(find(".unplayed").getText()).isEqualTo("not played");
    }

    @Test
    void words_withMarkup_stayWords() {
        open("crowded", DESK, "light");

        assertThat(find("h1").getText()).contains("<b>marks</b> & \"quotes\"");
        open("lose-one", DESK, "light");
        assertThat((String) browser.run("return document.querySelector('pre').textContent"))
                .contains("a comment with </script> in it");
    }

    @Test
    void page_printedByNight_isLightAndWhole() {
        open("lose-one", DESK, "dark");

        browser.run("window.dispatchEvent(new Event('beforeprint'))");
        assertThat((String) browser.run("return getComputedStyle(document.documentElement).backgroundColor"))
                .isEqualTo("rgb(251, 250, 246)");
        assertThat(number("return document.querySelectorAll('details:not([open])').length"))
                .isZero();
        browser.run("window.dispatchEvent(new Event('afterprint'))");
        assertThat((String) browser.run("return getComputedStyle(document.documentElement).backgroundColor"))
                .isEqualTo("rgb(20, 23, 26)");
        assertThat(new String(browser.printed(), 0, 5, java.nio.charset.StandardCharsets.US_ASCII))
                .isEqualTo("%PDF-");
    }

    @Test
    void page_ofAMinute_staysSmall() throws IOException {
        assertThat(Files.size(PAGES.get("twelve"))).isLessThan(MOST_BYTES);
    }
}
