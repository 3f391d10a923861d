package steelyard.harness.tune;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.function.Function;
import java.util.stream.Collectors;
import java.util.stream.IntStream;
import steelyard.drills.model.Measure.Unit;
import steelyard.harness.record.Wording;
import steelyard.harness.tune.Result.Axis;

/**
 * The settings that one would take, and why.
 *
 * <p>Those are looked at whose expectations all hold together in enough plays, and of these the ones that no other of
 * them beats. On each of the two measures a cell loses something to the best non-dominated cell of the whole grid: nothing
 * at the best, all at the worst of them. The one is taken whose larger loss is the smallest (minimax regret, Savage 1951);
 * among equals the one with the smaller loss on what is wanted.
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
        List<Result> holding =
                results.stream().filter(each -> each.holds(hold) && each.fit()).toList();
        List<Result> good = new ArrayList<>();
        List<Result> rest = new ArrayList<>(results);
        for (Result each : holding) {
            if (holding.stream().noneMatch(other -> Front.beats(other, each))) {
                good.add(each);
                rest.remove(each);
            }
        }
        Losses losses = Losses.among(IntStream.range(0, results.size())
                .filter(at -> marks.get(at) == Front.Mark.NON_DOMINATED)
                .mapToObj(results::get)
                .toList());
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
        return "In no cell do all expectations hold together in at least " + share(hold) + " of plays; nearest is "
                + best.cell().words() + " with " + share(best.held().share()) + ".";
    }

    private static String sentence(Result taken, int candidates, Losses losses, double hold) {
        String all = "where all expectations hold together in at least " + share(hold) + " of plays";
        if (candidates == 1) {
            return "Of the cells " + all + " it is the only one that no other beats on both measures.";
        }
        return "Of the " + candidates + " cells that no other beats among those " + all
                + ", its larger loss is the smallest: " + loss(taken.want(), losses.ofWant(taken)) + " and "
                + loss(taken.against(), losses.ofAgainst(taken))
                + " of the way from the best non-dominated cell of the grid to the worst.";
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

        /** With sign -1 the greatest, negated; a cell without values has no say. */
        private static double least(List<Result> results, Function<Result, Axis> axis, int sign) {
            return results.stream()
                    .mapToDouble(each -> axis.apply(each).cost())
                    .filter(Double::isFinite)
                    .map(cost -> sign * cost)
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
            if (worst == best) {
                return cost > best ? 1 : 0;
            }
            return (cost - best) / (worst - best);
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
