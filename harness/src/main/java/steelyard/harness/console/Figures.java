package steelyard.harness.console;

import java.math.BigDecimal;
import java.math.MathContext;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.stream.Collectors;
import steelyard.drills.model.Cause;
import steelyard.harness.record.PlayBoard;
import steelyard.harness.record.Wording;

/** Numbers as they are shown while a play runs: of a steady width, the same in every locale. */
final class Figures {
    private Figures() {}

    /** {@code 15.0 s}. */
    static String seconds(long nanos) {
        return String.format(Locale.ROOT, "%.1f s", nanos / 1e9);
    }

    /** {@code 15,412}. */
    static String count(long count) {
        return String.format(Locale.ROOT, "%,d", count);
    }

    /** {@code 0.2 %} below ten percent, {@code 33 %} from there. */
    static String share(double share) {
        double percent = share * 100;
        return String.format(Locale.ROOT, percent > 0 && percent < 9.95 ? "%.1f %%" : "%.0f %%", percent);
    }

    /** A share that never reads as nothing: {@code 0.0043 %}, {@code 0.2 %}, {@code 33 %}. */
    static String exactShare(double share) {
        double percent = share * 100;
        return percent > 0 && percent < 0.095
                ? new BigDecimal(percent).round(new MathContext(2)).toPlainString() + " %"
                : share(share);
    }

    /** {@code 12}, or {@code 3.4} for what is no whole number. */
    static String weight(double weight) {
        return String.format(Locale.ROOT, Math.abs(weight - Math.rint(weight)) < 0.05 ? "%.0f" : "%.1f", weight);
    }

    /**
     * {@code 893/s}, of the last second; once traffic has ended {@code 20,000 offered}, with {@code , 3 open} for what the
     * play runs on for.
     */
    static String traffic(PlayBoard.Figures figures, long lastsNanos) {
        if (figures.atNanos() < lastsNanos) {
            return count(figures.offeredLastSecond()) + "/s";
        }
        boolean runsOn = !figures.ended() && figures.open() > 0;
        return count(figures.offered()) + " offered" + (runsOn ? ", " + count(figures.open()) + " open" : "");
    }

    /**
     * What the balancer has to live with, where it has: {@code , last resort, 12 waiting, 1 backend without a fresh
     * reading}.
     */
    static String balancer(PlayBoard.Figures figures) {
        String waiting = figures.waiting() == 0 ? "" : ", " + count(figures.waiting()) + " waiting";
        String unread = figures.unread() == 0
                ? ""
                : ", " + Wording.count(figures.unread(), "backend", "backends") + " without a fresh reading";
        return lastResort(figures) + waiting + unread;
    }

    private static String lastResort(PlayBoard.Figures figures) {
        List<String> pools = figures.backends().stream()
                .filter(PlayBoard.BackendFigures::lastResort)
                .map(PlayBoard.BackendFigures::pool)
                .distinct()
                .toList();
        boolean one = figures.backends().stream()
                        .map(PlayBoard.BackendFigures::pool)
                        .distinct()
                        .count()
                == 1;
        return pools.isEmpty() ? "" : ", last resort" + (one ? "" : " in " + String.join(" and ", pools));
    }

    /** {@code reset 23, refused 8}, the most first. */
    static String causes(Map<Cause, Long> failures) {
        return failures.entrySet().stream()
                .sorted(Map.Entry.<Cause, Long>comparingByValue(Comparator.reverseOrder())
                        .thenComparing(Map.Entry.comparingByKey()))
                .map(each -> each.getKey().word() + " " + count(each.getValue()))
                .collect(Collectors.joining(", "));
    }
}
