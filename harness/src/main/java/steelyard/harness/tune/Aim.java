package steelyard.harness.tune;

import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Measure;
import steelyard.drills.read.NearWord;
import steelyard.harness.compare.Direction;
import steelyard.harness.forecast.Figure;

/**
 * A measure that a grid is looked at by: the first figure whose words begin with its name, expectations before the
 * standard set. {@code failed}, {@code share of fulmar}, {@code latency 99%} and {@code failed, whole play} are names.
 *
 * @param name as it was given
 */
public record Aim(String name) {

    /** Its figure's number among those of a drill; -1 when it names none. */
    int in(List<Figure> figures) {
        String wanted = plain(name);
        for (int figure = 0; figure < figures.size(); figure++) {
            String words = plain(figures.get(figure).text());
            boolean begins = words.startsWith(wanted);
            if (begins && (words.length() == wanted.length() || " ,".indexOf(words.charAt(wanted.length())) >= 0)) {
                return figure;
            }
        }
        return -1;
    }

    /**
     * Makes sure that it names a figure with a better side.
     *
     * @param option that gave it, for the message
     * @throws TuneRefused when not
     */
    void check(String option, List<Figure> figures) throws TuneRefused {
        int figure = in(figures);
        if (figure < 0) {
            throw new TuneRefused(option + " '" + name + "' is no measure of this drill; " + remedy(figures));
        }
        if (direction(figures.get(figure)).side() == Direction.Side.NONE) {
            throw new TuneRefused(option + " '" + name
                    + "' has no better side by itself; give the drill an expectation on it, and its bound says which");
        }
    }

    static Direction direction(Figure figure) {
        return figure.bound() == null
                ? Direction.of(figure.measure(), Double.NaN, Double.NaN)
                : Direction.of(
                        figure.measure(), figure.bound().least(), figure.bound().most());
    }

    private String remedy(List<Figure> figures) {
        Set<String> known = new TreeSet<>();
        figures.forEach(each -> known.add(start(each)));
        String near = NearWord.nearest(name, known);
        if (near != null) {
            return "did you mean '" + near + "'?";
        }
        Set<String> words = new TreeSet<>();
        figures.forEach(each -> words.add(each.measure().word()));
        return "it has " + String.join(", ", words)
                + (word() == null ? "" : "; write it like '" + first(figures) + "'");
    }

    private @Nullable String word() {
        for (Measure each : Measure.values()) {
            if (plain(name).startsWith(each.word())) {
                return each.word();
            }
        }
        return null;
    }

    private String first(List<Figure> figures) {
        String word = String.valueOf(word());
        return figures.stream()
                .filter(each -> each.measure().word().equals(word))
                .map(Aim::start)
                .findFirst()
                .orElse(word);
    }

    /** Its words up to the window. */
    private static String start(Figure figure) {
        String text = figure.text();
        int comma = text.lastIndexOf(", ");
        return comma < 0 ? text : text.substring(0, comma);
    }

    private static String plain(String words) {
        return words.strip().replaceAll("\\s+", " ").replaceAll(" ?%", "%");
    }
}
