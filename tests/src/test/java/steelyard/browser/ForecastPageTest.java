package steelyard.browser;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;
import org.openqa.selenium.By;
import steelyard.drills.read.DrillLibrary;
import steelyard.forecast.Small;
import steelyard.harness.forecast.Series;
import steelyard.harness.report.Report;

/** The report of a forecast as a person sees it. */
class ForecastPageTest {
    /** More veiled pixels than the edges of lines come to; a band has ten times as many. */
    private static final int BAND = 15_000;

    /** By chart: how many pixels are veiled by a shade. */
    private static final String VEILED = """
            return [...document.querySelectorAll('.chart')].filter(each => each.querySelector('canvas')).map(each => {
              const canvas = each.querySelector('canvas');
              const pixels = canvas.getContext('2d').getImageData(0, 0, canvas.width, canvas.height).data;
              let veiled = 0;
              for (let at = 3; at < pixels.length; at += 4) if (pixels[at] > 30 && pixels[at] < 200) veiled++;
              return each.querySelector('h3').textContent + '|' + veiled;
            });
            """;

    @TempDir
    private static @Nullable Path folder;

    private static final Map<String, Path> PAGES = new LinkedHashMap<>();
    private static @Nullable Chromium browser;

    @BeforeAll
    static void openBrowser() throws Exception {
        browser = Chromium.start();
        String three = DrillLibrary.text("lose-one-of-three").orElseThrow();
        forecast("three", three);
        forecast("many", three.replace("petrel: {", "petrel: {times: 40, "));
    }

    private static void forecast(String name, String drill) throws Exception {
        Small.record(Series.of(Small.read(drill), 1, 7), 2, folder.resolve(name));
        PAGES.put(name, folder.resolve(name).resolve("report.html"));
    }

    @AfterAll
    static void closeBrowser() throws Exception {
        if (browser != null) {
            browser.close();
        }
    }

    static Stream<Arguments> everyView() {
        return Stream.of("three", "many")
                .flatMap(run -> Stream.of(1400, 800, 390)
                        .flatMap(width -> Stream.of("light", "dark").map(scheme -> Arguments.of(run, width, scheme))));
    }

    @ParameterizedTest
    @MethodSource("everyView")
    void page_inEveryView_isQuietFitsAndReads(String run, int width, String scheme) {
        browser.open(PAGES.get(run), width, scheme);
        assertThat(browser.run("return document.documentElement.dataset.drawn")).isEqualTo("yes");
        PageLooks.assertGood(browser, width);
    }

    @Test
    void charts_ofAForecast_areShadedWhereLinesStood() {
        browser.open(PAGES.get("three"), 1400, "light");
        List<?> charts = (List<?>) browser.run(VEILED);
        for (String title :
                List.of("Share of the attempts", "Requests a second", "Latency of", "In flight", "Utilisation")) {
            assertThat(charts).as(title).anySatisfy(chart -> {
                assertThat((String) chart).startsWith(title);
                assertThat(Integer.parseInt(((String) chart).replaceAll(".*\\|", "")))
                        .as((String) chart)
                        .isGreaterThan(title.startsWith("Share") ? BAND / 10 : BAND);
            });
        }
        assertThat(text("#step")).contains("medians over 7 plays");
    }

    @Test
    void charts_ofAPlay_haveNoShade() throws Exception {
        Path play = InventedRuns.all().get("lose-one").write(folder.resolve("play"));
        browser.open(Report.write(play), 1400, "light");
        List<?> charts = (List<?>) browser.run(VEILED);
        assertThat(charts)
                .hasSizeGreaterThan(4)
                .filteredOn(each -> !((String) each).startsWith("Standing"))
                .allSatisfy(chart -> assertThat(Integer.parseInt(((String) chart).replaceAll(".*\\|", "")))
                        .as((String) chart)
                        .isLessThan(BAND));
    }

    @Test
    void tables_ofAForecast_sayInWhatShareOfPlays() {
        browser.open(PAGES.get("three"), 1400, "light");
        assertThat(text(".kicker")).startsWith("Forecast by 7 plays in virtual time · 60 s each · seeds 1 to 7");
        assertThat(text(".verdict")).startsWith("Met: all 6 expectations held in at least 90");
        assertThat(text("#expectations thead")).contains("Held in", "95 % confidence");
        assertThat(text("#expectations tbody tr")).contains("100 %", "59 % to 100 %", "met");
        browser.run("document.querySelectorAll('details').forEach(each => each.open = true)");
        assertThat(text(".changes tbody tr")).contains("fulmar up down misses 100.0");
    }

    @Test
    void charts_ofManyBackends_areOfGroups() {
        browser.open(PAGES.get("many"), 1400, "light");
        assertThat(text("#readout tbody")).doesNotContain("petrel-7");
        assertThat(text("h3")).startsWith("Attempts a second, by group");
    }

    private static String text(String css) {
        return browser.driver().findElement(By.cssSelector(css)).getText();
    }
}
