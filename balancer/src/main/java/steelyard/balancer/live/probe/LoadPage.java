package steelyard.balancer.live.probe;

import java.util.Arrays;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import steelyard.balancer.settings.LoadSettings;

/**
 * Reads utilisations off a load page in OpenMetrics text, and reads past everything else on it.
 *
 * <p>A gauge is a sample with a label {@code gauge} of its name, as in {@code load_ratio{gauge="cpu"} 0.5}, or one whose
 * metric has the name itself. The first counts; what is not a number from 0 to 1 does not.
 */
final class LoadPage {
    /** Name, labels, value; a timestamp or an exemplar may follow. */
    private static final Pattern SAMPLE =
            Pattern.compile("([a-zA-Z_:][a-zA-Z0-9_:]*)(?:\\{((?:[^\"}]|\"(?:[^\"\\\\]|\\\\.)*+\")*+)})? +(\\S+).*");

    private static final Pattern GAUGE = Pattern.compile("(?:^|,)\\s*gauge=\"((?:[^\"\\\\]|\\\\.)*)\"");

    private LoadPage() {}

    /** The values in the order of {@code gauges}; NaN for one that the page does not show. */
    static double[] read(String page, List<LoadSettings.Gauge> gauges) {
        double[] values = new double[gauges.size()];
        Arrays.fill(values, Double.NaN);
        page.lines().filter(line -> !line.startsWith("#")).forEach(line -> {
            Matcher sample = SAMPLE.matcher(line);
            if (sample.matches()) {
                take(sample, gauges, values);
            }
        });
        return values;
    }

    private static void take(Matcher sample, List<LoadSettings.Gauge> gauges, double[] values) {
        String labels = sample.group(2);
        Matcher labelled = GAUGE.matcher(labels == null ? "" : labels);
        String name = labelled.find() ? labelled.group(1) : sample.group(1);
        for (int gauge = 0; gauge < values.length; gauge++) {
            if (gauges.get(gauge).name().equals(name) && Double.isNaN(values[gauge])) {
                values[gauge] = share(sample.group(3));
            }
        }
    }

    private static double share(String text) {
        try {
            double value = Double.parseDouble(text);
            return value >= 0 && value <= 1 ? value : Double.NaN;
        } catch (NumberFormatException e) {
            return Double.NaN;
        }
    }
}
