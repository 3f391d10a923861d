package steelyard.balancer.core.decide;

import java.util.function.BooleanSupplier;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.settings.BenchSettings;

/** What the bench cap of a pool allows: whether one more of its members may be benched. */
final class BenchCap implements BooleanSupplier {
    private static final double SLACK = 1e-9;

    private final BackendStanding[] standings;
    private final int most;

    /** @param bench null for a pool that benches nobody */
    BenchCap(BackendStanding[] standings, @Nullable BenchSettings bench) {
        this.standings = standings;
        this.most = bench == null ? 0 : (int) (bench.cap() * standings.length + SLACK);
    }

    @Override
    public boolean getAsBoolean() {
        int benched = 0;
        for (BackendStanding each : standings) {
            benched += each.benched() ? 1 : 0;
        }
        return benched < most;
    }
}
