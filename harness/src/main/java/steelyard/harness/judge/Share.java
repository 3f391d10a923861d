package steelyard.harness.judge;

import java.util.Set;
import java.util.stream.IntStream;
import steelyard.harness.record.Cast;

/** {@code share}: attempts picked for the target, taken together, over all attempts picked for the pools of its backends. */
final class Share extends Meter {
    private final WindowPicks picks;
    private final int[] members;
    private final int[] pools;

    Share(WindowPicks picks, int[] members, Cast cast) {
        this.picks = picks;
        this.members = members;
        pools = IntStream.of(members).map(cast::poolOf).distinct().toArray();
    }

    @Override
    Set<Hears> hears() {
        return Set.of();
    }

    @Override
    Reading read() {
        long all = IntStream.of(pools).mapToLong(picks::ofPool).sum();
        long own = IntStream.of(members).mapToLong(picks::ofBackend).sum();
        return all == 0 ? Reading.notMeasured("nothing was picked") : Reading.of((double) own / all);
    }
}
