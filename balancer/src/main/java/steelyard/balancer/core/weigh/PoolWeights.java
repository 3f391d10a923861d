package steelyard.balancer.core.weigh;

import java.util.Arrays;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.settings.PoolSettings;

/**
 * Effective weights and entitled shares of one pool's members.
 *
 * <p>Effective weight = set weight x ramp fraction; under host weights = host's weight x the member's part of the set
 * weights that the pool may pick on that host x ramp fraction, where one that may not be picked counts as if it came back alone; under plain round robin = ramp fraction. Entitled share =
 * effective weight over the sum of those that may be picked. Both are computed for a whole pool at once and kept until
 * the instant or a weight or standing changes, so that reading every member costs one pass. Not thread-safe.
 */
public final class PoolWeights {
    private final boolean weighs;
    private final boolean byHost;
    private final BackendStanding[] standings;
    private final int[] set;
    private final int[] hostOf;
    private final int[] hostSet;
    private final double[] effective;
    private final double[] onHost;
    private double sum;
    private boolean fresh;
    private long freshAtNanos;

    /**
     * @param standings of the pool's members
     * @param set the members' set weights; read again after each {@link #stale}
     * @param hostOf the host of each member
     * @param hostSet the set weights of all hosts; read again after each {@link #stale}
     */
    public PoolWeights(PoolSettings pool, BackendStanding[] standings, int[] set, int[] hostOf, int[] hostSet) {
        weighs = pool.method() != PoolSettings.Method.ROUND_ROBIN && pool.method() != PoolSettings.Method.RANDOM;
        byHost = pool.weights() == PoolSettings.Weights.HOST;
        this.standings = standings;
        this.set = set;
        this.hostOf = hostOf;
        this.hostSet = hostSet;
        effective = new double[set.length];
        onHost = new double[hostSet.length];
    }

    /** A standing or a weight has changed. */
    public void stale() {
        fresh = false;
    }

    /** What the member weighs now, whether or not it may be picked. */
    public double effectiveWeight(int member, long nowNanos) {
        refresh(nowNanos);
        return effective[member];
    }

    /** From 0 to 1; 0 for a member that may not be picked. */
    public double entitledShare(int member, long nowNanos) {
        refresh(nowNanos);
        return sum > 0 && standings[member].shown().pickable() ? effective[member] / sum : 0;
    }

    private void refresh(long nowNanos) {
        if (fresh && freshAtNanos == nowNanos) {
            return;
        }
        sumHosts();
        sum = 0;
        for (int member = 0; member < set.length; member++) {
            effective[member] = fullWeight(member) * (standings[member].rampFraction(nowNanos) / 1e9);
            if (standings[member].shown().pickable()) {
                sum += effective[member];
            }
        }
        fresh = true;
        freshAtNanos = nowNanos;
    }

    private double fullWeight(int member) {
        if (!weighs) {
            return 1;
        }
        if (!byHost) {
            return set[member];
        }
        // A member that may not be picked is shown as if it alone came back among those that may be.
        double there = onHost[hostOf[member]] + (standings[member].shown().pickable() ? 0 : set[member]);
        return there == 0 ? 0 : (double) hostSet[hostOf[member]] * set[member] / there;
    }

    private void sumHosts() {
        if (!byHost) {
            return;
        }
        Arrays.fill(onHost, 0);
        for (int member = 0; member < set.length; member++) {
            if (standings[member].shown().pickable()) {
                onHost[hostOf[member]] += set[member];
            }
        }
    }
}
