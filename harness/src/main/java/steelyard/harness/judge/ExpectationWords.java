package steelyard.harness.judge;

import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Expectation.Options;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Wording;

/** What an expectation looks at, in words: {@code latency 99 %, from 25 s to 35 s}. */
final class ExpectationWords {
    private ExpectationWords() {}

    static String text(Expectation expectation, long lastsNanos) {
        String of = of(expectation);
        return expectation.measure().word() + detail(expectation.measure(), expectation.options())
                + (of == null ? "" : " of " + of) + ", " + when(expectation, lastsNanos);
    }

    /** The target in words, or null for the whole stage. */
    static @Nullable String of(Expectation expectation) {
        if (expectation.of() != null) {
            return expectation.of().text();
        }
        return expectation.pool() == null ? null : "pool " + expectation.pool();
    }

    private static String when(Expectation expectation, long lastsNanos) {
        if (expectation.after() != null) {
            return "after " + expectation.after();
        }
        boolean whole = expectation.fromNanos() == 0 && expectation.toNanos() == lastsNanos;
        return whole
                ? "whole play"
                : "from " + Wording.duration(expectation.fromNanos()) + " to "
                        + Wording.duration(expectation.toNanos());
    }

    private static String detail(Measure measure, Options options) {
        return switch (measure) {
            case FAILED -> causes(options) + worst(options);
            case RETRY_LOAD -> worst(options);
            case LATENCY -> options.quantile() < 0 ? " mean" : " " + Wording.exact(Unit.SHARE, options.quantile());
            case LONGEST_OUTAGE ->
                options.outageShare() == Options.DEFAULT.outageShare()
                        ? ""
                        : " at " + Wording.exact(Unit.SHARE, options.outageShare());
            case DETECTED_IN ->
                options.until() == null ? "" : " as " + options.until().word();
            case STANDING_CHANGES -> options.shown() ? " shown" : "";
            case SHARE,
                    SHIFTED_IN,
                    SETTLED_IN,
                    DRAINED_IN,
                    CUT,
                    PEAK_IN_FLIGHT,
                    PEAK_UTILISATION,
                    FAIRNESS,
                    WEIGHT_LAG,
                    SWING -> "";
        };
    }

    private static String causes(Options options) {
        return options.causes().size() == Cause.values().length
                ? ""
                : options.causes().stream().sorted().map(Cause::word).collect(Collectors.joining(", ", " (", ")"));
    }

    private static String worst(Options options) {
        return options.worstNanos() == 0 ? "" : " in the worst " + Wording.duration(options.worstNanos());
    }
}
