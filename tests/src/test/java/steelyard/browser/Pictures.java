package steelyard.browser;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import steelyard.harness.report.Report;

/**
 * Takes pictures of reports; run by hand, from the project's folder:
 *
 * <pre>
 * mvn -q -pl tests -am test-compile dependency:build-classpath -Dmdep.outputFile=target/classpath
 * java -cp tests/target/test-classes:$(cat tests/target/classpath) steelyard.browser.Pictures RUN/report.html \
 *     .readme/report.png 1400 light 1150
 * </pre>
 *
 * <p>Arguments: a report and a PNG file, with an optional width, scheme and height
 * ({@code report.html report.png 1400 light 1100}); or one folder, which is filled with the invented runs and their
 * pictures at both widths in both schemes.
 */
final class Pictures {
    private Pictures() {}

    public static void main(String... arguments) throws IOException {
        try (Chromium browser = Chromium.start()) {
            if (arguments.length == 1) {
                takeAll(browser, Path.of(arguments[0]));
            } else {
                takeOne(browser, arguments);
            }
        }
    }

    private static void takeOne(Chromium browser, String... arguments) throws IOException {
        int width = arguments.length > 2 ? Integer.parseInt(arguments[2]) : 1400;
        String scheme = arguments.length > 3 ? arguments[3] : "light";
        Path png = Path.of(arguments[1]);
        browser.open(Path.of(arguments[0]).toAbsolutePath(), width, scheme);
        if (arguments.length > 4) {
            browser.picture(png, width, Integer.parseInt(arguments[4]));
        } else {
            browser.picture(png, width);
        }
    }

    private static void takeAll(Chromium browser, Path folder) throws IOException {
        for (Map.Entry<String, InventedRun> run : InventedRuns.all().entrySet()) {
            Path page = Report.write(run.getValue().write(folder.resolve(run.getKey())));
            for (int width : new int[] {1400, 390}) {
                for (String scheme : new String[] {"light", "dark"}) {
                    browser.open(page.toAbsolutePath(), width, scheme);
                    browser.picture(folder.resolve(run.getKey() + "-" + width + "-" + scheme + ".png"), width);
                }
            }
            browser.open(page.toAbsolutePath(), 390, "light");
            browser.run("document.getElementById('play-head').scrollIntoView()");
            browser.picture(folder.resolve(run.getKey() + "-phone.png"), 390, 844);
            browser.open(page.toAbsolutePath(), 1400, "dark");
            Files.write(folder.resolve(run.getKey() + ".pdf"), browser.printed());
        }
    }
}
