package steelyard.browser;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Base64;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.logging.Level;
import java.util.stream.Stream;
import org.junit.jupiter.api.Assertions;
import org.junit.jupiter.api.Assumptions;
import org.openqa.selenium.JavascriptExecutor;
import org.openqa.selenium.OutputType;
import org.openqa.selenium.chrome.ChromeDriver;
import org.openqa.selenium.chrome.ChromeOptions;
import org.openqa.selenium.logging.LogEntry;
import org.openqa.selenium.logging.LogType;
import org.openqa.selenium.logging.LoggingPreferences;

/** The system's own headless Chromium, with a profile that is thrown away. */
final class Chromium implements AutoCloseable {
    private static final Path BROWSER = Path.of("/usr/bin/chromium");
    private static final Path DRIVER = Path.of("/usr/bin/chromedriver");

    private final Path profile;
    private final ChromeDriver driver;

    private Chromium() throws IOException {
        profile = Files.createTempDirectory("steelyard-chromium");
        ChromeOptions options = new ChromeOptions();
        options.setBinary(BROWSER.toFile());
        options.addArguments(
                "--headless=new",
                "--no-sandbox",
                "--disable-gpu",
                "--disable-quic",
                "--no-first-run",
                "--disable-background-networking",
                "--disable-component-update",
                "--disable-sync",
                "--hide-scrollbars",
                "--user-data-dir=" + profile);
        LoggingPreferences logs = new LoggingPreferences();
        logs.enable(LogType.BROWSER, Level.ALL);
        options.setCapability(ChromeOptions.LOGGING_PREFS, logs);
        System.setProperty("webdriver.chrome.driver", DRIVER.toString());
        driver = new ChromeDriver(options);
        driver.manage().timeouts().scriptTimeout(Duration.ofSeconds(60));
    }

    /**
     * Starts a browser. Where there is none, the calling test is aborted with the remedy; it fails instead where all
     * tests were asked for ({@code CI} or {@code STEELYARD_TESTS=all} in the environment).
     */
    static Chromium start() throws IOException {
        if (!Files.isExecutable(BROWSER) || !Files.isExecutable(DRIVER)) {
            String message = "no browser at " + BROWSER + " and " + DRIVER
                    + ": install the packages chromium and chromium-driver";
            boolean all = System.getenv("CI") != null || "all".equals(System.getenv("STEELYARD_TESTS"));
            if (all) {
                Assertions.fail(message);
            }
            Assumptions.abort(message);
        }
        return new Chromium();
    }

    /** Opens a page at a width in CSS pixels, {@code scheme} light or dark. */
    void open(Path page, int width, String scheme) {
        driver.executeCdpCommand(
                "Emulation.setEmulatedMedia",
                Map.of("features", List.of(Map.of("name", "prefers-color-scheme", "value", scheme))));
        size(width, 900);
        driver.get(page.toUri().toString());
    }

    private void size(int width, int height) {
        driver.executeCdpCommand(
                "Emulation.setDeviceMetricsOverride",
                Map.of("width", width, "height", height, "deviceScaleFactor", 1, "mobile", false));
    }

    /** What the page has written to its console, warnings and errors only. */
    List<String> complaints() {
        return driver.manage().logs().get(LogType.BROWSER).getAll().stream()
                .filter(entry -> entry.getLevel().intValue() >= Level.WARNING.intValue())
                .map(LogEntry::getMessage)
                .toList();
    }

    Object run(String script, Object... arguments) {
        return ((JavascriptExecutor) driver).executeScript(script, arguments);
    }

    ChromeDriver driver() {
        return driver;
    }

    /** The page from top to bottom as a picture. */
    void picture(Path png, int width) throws IOException {
        long height = (Long) run("return Math.ceil(document.documentElement.scrollHeight)");
        picture(png, width, (int) height);
    }

    /** The page's first so many pixels as a picture. */
    void picture(Path png, int width, int height) throws IOException {
        size(width, height);
        run("return new Promise(done => requestAnimationFrame(() => requestAnimationFrame(() => done(1))))");
        Files.write(png, driver.getScreenshotAs(OutputType.BYTES));
    }

    /** The page as it would be printed on A4. */
    byte[] printed() {
        Map<String, Object> pdf = driver.executeCdpCommand(
                "Page.printToPDF", Map.of("paperWidth", 8.27, "paperHeight", 11.69, "preferCSSPageSize", true));
        return Base64.getDecoder().decode((String) pdf.get("data"));
    }

    @Override
    public void close() throws IOException {
        driver.quit();
        try (Stream<Path> files = Files.walk(profile)) {
            files.sorted(Comparator.reverseOrder()).forEach(Chromium::delete);
        }
    }

    private static void delete(Path path) {
        try {
            Files.deleteIfExists(path);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }
}
