package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.function.Function;
import java.util.stream.Collectors;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Wording;
import steelyard.harness.tune.Result.Axis;

/**
 * The settings that one would take, and why.
 *
 * <p>Those are looked at that no other beats and whose expectations all hold in enough plays. On each of the two
 * measures a cell loses something to the best of them: nothing for the best, all for the worst. The one is taken whose
 * larger loss is the smallest (minimax regret, Savage 1951); among equals the one with the smaller loss on what is wanted.
 *
 * @param taken empty when no cell's expectations hold
 * @param reason one sentence
 * @param ranked the cells in the order in which they would be taken: first those that hold and are not beaten
 * @param alike cells that chance does not tell from the one that is taken
 */
public record Choice(Optional<Result> taken, String reason, List<Result> ranked, List<Result> alike) {
    public Choice {
        ranked = List.copyOf(ranked);
        alike = List.copyOf(alike);
    }

    /**
     * Chooses among results.
     *
     * @param results at least one
     * @param hold the share of plays in which all expectations must hold, from 0 to 1
     */
    public static Choice of(List<Result> results, List<Front.Mark> marks, double hold) {
        List<Result> good = new ArrayList<>();
        List<Result> rest = new ArrayList<>();
        for (int at = 0; at < results.size(); at++) {
            Result result = results.get(at);
            boolean open = marks.get(at) == Front.Mark.NON_DOMINATED && result.holds(hold) && result.fit();
            (open ? good : rest).add(result);
        }
        Losses losses = Losses.among(good);
        good.sort(Comparator.comparingDouble(losses::larger).thenComparingDouble(losses::ofWant));
        rest.sort(Comparator.comparing((Result each) -> !each.fit())
                .thenComparing(each -> -Math.min(each.held().share(), hold))
                .thenComparing(Result::want, Axis::compareTo)
                .thenComparing(Result::against, Axis::compareTo));
        List<Result> ranked = new ArrayList<>(good);
        ranked.addAll(rest);
        if (good.isEmpty()) {
            return new Choice(Optional.empty(), none(ranked.get(0), hold), ranked, List.of());
        }
        Result taken = good.get(0);
        List<Result> alike = results.stream()
                .filter(each -> each != taken && each.holds(hold) && Front.alike(each, taken))
                .toList();
        return new Choice(Optional.of(taken), sentence(taken, good.size(), losses, hold), ranked, alike);
    }

    private static String none(Result best, double hold) {
        return "None: in no cell that is not beaten all expectations hold in at least " + share(hold)
                + " of plays; nearest is " + best.cell().words() + " with "
                + share(best.held().share()) + ".";
    }

    private static String sentence(Result taken, int candidates, Losses losses, double hold) {
        String all = "whose expectations all hold in at least " + share(hold) + " of plays";
        if (candidates == 1) {
            return "It is the only non-dominated cell " + all + ".";
        }
        return "Of the " + candidates + " non-dominated cells " + all + " its larger loss is the smallest: "
                + loss(taken.want(), losses.ofWant(taken)) + " and " + loss(taken.against(), losses.ofAgainst(taken))
                + " of the way from the best of them to the worst.";
    }

    private static String loss(Axis axis, double loss) {
        return axis.figure().measure().word() + " " + share(StrictMath.round(loss * 100) / 100.0);
    }

    private static String share(double share) {
        return Wording.value(Unit.SHARE, share);
    }

    /** What cells lose to the best among some of them, from 0 to 1. */
    private record Losses(double bestWant, double worstWant, double bestAgainst, double worstAgainst) {
        static Losses among(List<Result> results) {
            return new Losses(
                    least(results, Result::want),
                    -least(results, Result::want, -1),
                    least(results, Result::against),
                    -least(results, Result::against, -1));
        }

        private static double least(List<Result> results, Function<Result, Axis> axis) {
            return least(results, axis, 1);
        }

        private static double least(List<Result> results, Function<Result, Axis> axis, int sign) {
            return results.stream()
                    .mapToDouble(each -> sign * axis.apply(each).cost())
                    .min()
                    .orElse(0);
        }

        double ofWant(Result result) {
            return part(result.want().cost(), bestWant, worstWant);
        }

        double ofAgainst(Result result) {
            return part(result.against().cost(), bestAgainst, worstAgainst);
        }

        double larger(Result result) {
            return Math.max(ofWant(result), ofAgainst(result));
        }

        private static double part(double cost, double best, double worst) {
            if (!Double.isFinite(worst)) {
                return Double.isFinite(cost) ? 0 : 1;
            }
            return worst == best ? 0 : (cost - best) / (worst - best);
        }
    }

    /** The cells that are like the one that is taken, in words; empty without any. */
    public String note() {
        return alike.isEmpty()
                ? ""
                : "Chance does not tell it from: "
                        + alike.stream().map(each -> each.cell().words()).collect(Collectors.joining("; ")) + ".";
    }
}
