package steelyard.harness.forecast;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Wording;

/**
 * What a forecast says of one figure.
 *
 * @param held in how many plays its bound held; null where nothing is expected
 * @param met whether that is enough; true where nothing is expected
 */
public record Foreseen(
        Figure figure, Spread spread, @Nullable Held held, boolean met, Gaps gaps) {

    /** @param hold the share of plays in which a bound must hold, from 0 to 1 */
    static Foreseen of(Played played, int number, double hold) {
        Figure figure = played.figures().get(number);
        Held held = figure.bound() == null ? null : played.held(number);
        boolean met = held == null || held.reaches(hold);
        return new Foreseen(figure, played.spread(number), held, met, Gaps.of(played, number));
    }

    /** What has to be said about plays without a value, or null. */
    public @Nullable String note() {
        return gaps.text();
    }

    /** The median in words, or why no play has a value. */
    public String median() {
        return Double.isNaN(spread.median()) ? gaps.commonest() : words(spread.median());
    }

    /** The 90 % band in words: {@code 2.1 s to 3.02 s}, {@code always}; empty with less than two values. */
    public String band() {
        if (spread.plays() - spread.undefined() < 2) {
            return "";
        }
        return spread.constant() && spread.undefined() == 0
                ? "always"
                : words(spread.low90()) + " to " + words(spread.high90());
    }

    /** Median and band in words: {@code 2.61 s (2.1 s to 3.02 s)}. */
    public String measured() {
        return band().isEmpty() ? median() : median() + " (" + band() + ")";
    }

    /** The share of plays in which it held, with its interval: {@code 98.5 % (95.7 % to 99.5 %)}; null without a bound. */
    public @Nullable String heldText() {
        return held == null
                ? null
                : percent(held.share()) + " % (" + percent(held.low()) + " % to " + percent(held.high()) + " %)";
    }

    /** How far the worst of the plays is from the bound, as a part of the bound's size; below 0 when it is missed. */
    double slack() {
        if (figure.bound() == null || Double.isNaN(spread.median())) {
            return Double.NEGATIVE_INFINITY;
        }
        double least = figure.bound().least();
        double most = figure.bound().most();
        double size = Double.isInfinite(most - least) ? Math.abs(Double.isInfinite(most) ? least : most) : most - least;
        double margin = Math.min(spread.least() - least, most - spread.most());
        return size == 0 ? Math.signum(margin + Double.MIN_VALUE) * Double.MAX_VALUE : margin / size;
    }

    private String words(double value) {
        // Between two counts a quantile may be any part of one.
        double shown = figure.unit() == Unit.COUNT ? StrictMath.round(value * 10) / 10.0 : value;
        return Wording.value(figure.unit(), shown);
    }

    /** A share from 0 to 1 in per cent, to one decimal, without the sign: {@code 98.5}. */
    public static String percent(double share) {
        double shown = StrictMath.round(share * 1000) / 10.0;
        String text = Double.toString(shown);
        return text.endsWith(".0") ? text.substring(0, text.length() - 2) : text;
    }
}
