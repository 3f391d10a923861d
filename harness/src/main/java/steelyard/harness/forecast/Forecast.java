package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.stream.IntStream;
import steelyard.harness.record.SelfCheck;
import steelyard.harness.record.Wording;

/**
 * What is to be said about a series of plays.
 *
 * @param hold an expectation is met when it holds in at least that share of plays, from 0 to 1
 * @param met every expectation is
 * @param fit every play was fit to judge; the word met means nothing otherwise
 * @param text one sentence that names what decided
 * @param expectations in the order of the drill
 * @param measures the standard set
 * @param checks the self-checks over all plays
 */
public record Forecast(
        Played played,
        double hold,
        boolean met,
        boolean fit,
        String text,
        List<Foreseen> expectations,
        List<Foreseen> measures,
        List<SelfCheck> checks) {
    /** What is asked for unless a person says otherwise. */
    public static final double USUAL_HOLD = 0.9;

    public Forecast {
        expectations = List.copyOf(expectations);
        measures = List.copyOf(measures);
        checks = List.copyOf(checks);
    }

    /**
     * Judges what was played.
     *
     * @param played at least one play
     * @param hold from 0, which asks for nothing, to 1
     */
    public static Forecast of(Played played, double hold) {
        if (played.plays().isEmpty()) {
            throw new IllegalArgumentException("nothing was played, so nothing is foreseen");
        }
        List<Foreseen> all = IntStream.range(0, played.figures().size())
                .mapToObj(figure -> Foreseen.of(played, figure, hold))
                .toList();
        List<Foreseen> expectations = all.subList(0, played.expectations());
        List<SelfCheck> checks = checks(played);
        boolean fit = checks.stream().allMatch(SelfCheck::ok);
        return new Forecast(
                played,
                hold,
                expectations.stream().allMatch(Foreseen::met),
                fit,
                sentence(expectations, checks, played.plays().size(), hold),
                expectations,
                all.subList(played.expectations(), all.size()),
                checks);
    }

    private static List<SelfCheck> checks(Played played) {
        List<Play> plays = played.plays();
        List<SelfCheck> checks = new ArrayList<>();
        for (int number = 0; number < plays.get(0).checks().size(); number++) {
            int check = number;
            List<Play> broken = plays.stream()
                    .filter(play -> !play.checks().get(check).ok())
                    .toList();
            String text = broken.isEmpty()
                    ? "holds in " + Wording.count(plays.size(), "play", "plays") + "; in the first: "
                            + plays.get(0).checks().get(check).text()
                    : "does not hold in " + broken.size() + " of " + Wording.count(plays.size(), "play", "plays")
                            + "; with seed " + broken.get(0).seed() + ": "
                            + broken.get(0).checks().get(check).text();
            checks.add(new SelfCheck(plays.get(0).checks().get(check).check(), broken.isEmpty(), text));
        }
        return checks;
    }

    private static String sentence(List<Foreseen> expectations, List<SelfCheck> checks, int plays, double hold) {
        for (SelfCheck check : checks) {
            if (!check.ok()) {
                return "Unfit to judge: " + check.check() + " " + check.text() + ".";
            }
        }
        if (expectations.isEmpty()) {
            return "Met: nothing was expected.";
        }
        List<Foreseen> missed =
                expectations.stream().filter(each -> !each.met()).toList();
        Foreseen decided = (missed.isEmpty() ? expectations : missed)
                .stream()
                        .min(Comparator.comparingDouble(Forecast::share).thenComparingDouble(Foreseen::slack))
                        .orElseThrow();
        String of = Foreseen.percent(hold) + " % of " + Wording.count(plays, "play", "plays");
        return missed.isEmpty()
                ? "Met: " + all(expectations.size()) + " in at least " + of + "; tightest: " + words(decided) + "."
                : "Not met: " + missed.size() + " of "
                        + Wording.count(expectations.size(), "expectation", "expectations") + " held in less than " + of
                        + "; worst: " + words(decided) + ".";
    }

    private static String all(int count) {
        return count == 1 ? "the one expectation held" : "all " + count + " expectations held";
    }

    private static double share(Foreseen each) {
        return each.held() == null ? 1 : each.held().share();
    }

    private static String words(Foreseen each) {
        return each.figure().text() + ": held in " + Foreseen.percent(share(each)) + " %, median " + each.median()
                + ", bound " + each.figure().boundText();
    }
}
