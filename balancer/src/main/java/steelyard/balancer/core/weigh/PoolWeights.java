package steelyard.balancer.core.weigh;

import java.util.Arrays;
import steelyard.balancer.core.pick.Ramp;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.standing.Eligibility;
import steelyard.balancer.settings.PoolSettings;

/**
 * Effective weights and entitled shares of one pool's members.
 *
 * <p>Effective weight = full weight x ramp fraction x headroom. The full weight is the set one; under host weights = host's
 * weight x the member's part of the set weights that the pool may pick on that host, where one that may not be picked counts
 * as if it came back alone; under a method that does not weigh, 1.
 *
 * <p>Entitled share = effective weight over the sum of those that may be picked by {@link Eligibility}. A full member keeps
 * its share: it is what the member is owed, and a limit in flight shows as less than that. Both are computed for a whole
 * pool at once and kept until the instant, a weight or a standing changes, so that reading every member costs one pass. Not
 * thread-safe.
 */
public final class PoolWeights {
    private final boolean byHost;
    private final BackendStanding[] standings;
    private final Eligibility eligibility;
    private final int[] headroomMilli;
    private final int[] set;
    private final int[] hostOf;
    private final int[] hostSet;
    private final double[] effective;
    private final double[] onHost;
    private boolean weighs = true;
    private double sum;
    private boolean fresh;
    private long freshAtNanos;

    /**
     * @param standings of the pool's members
     * @param set the members' set weights; read again after each {@link #stale}
     * @param headroomMilli the members' headroom in thousandths; read again likewise
     * @param hostOf the host of each member
     * @param hostSet the set weights of all hosts; read again likewise
     */
    public PoolWeights(
            PoolSettings pool,
            BackendStanding[] standings,
            Eligibility eligibility,
            int[] set,
            int[] headroomMilli,
            int[] hostOf,
            int[] hostSet) {
        byHost = pool.weights() == PoolSettings.Weights.HOST;
        this.standings = standings;
        this.eligibility = eligibility;
        this.set = set;
        this.headroomMilli = headroomMilli;
        this.hostOf = hostOf;
        this.hostSet = hostSet;
        effective = new double[set.length];
        onHost = new double[hostSet.length];
    }

    /** Whether set weights play a part in the method of the pool; they do until this is told. */
    public void weighs(boolean yes) {
        weighs = yes;
        stale();
    }

    /** A standing, a weight or a headroom has changed. */
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
        return sum > 0 && eligibility.open(member) ? effective[member] / sum : 0;
    }

    private void refresh(long nowNanos) {
        if (fresh && freshAtNanos == nowNanos) {
            return;
        }
        sumHosts();
        sum = 0;
        for (int member = 0; member < set.length; member++) {
            double ramp = (double) standings[member].rampFraction(nowNanos) / Ramp.FULL;
            double headroom = (double) headroomMilli[member] / Headroom.FULL;
            effective[member] = fullWeight(member) * ramp * headroom;
            if (eligibility.open(member)) {
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
        double there = onHost[hostOf[member]] + (eligibility.open(member) ? 0 : set[member]);
        return there == 0 ? 0 : (double) hostSet[hostOf[member]] * set[member] / there;
    }

    private void sumHosts() {
        if (!byHost) {
            return;
        }
        Arrays.fill(onHost, 0);
        for (int member = 0; member < set.length; member++) {
            if (eligibility.open(member)) {
                onHost[hostOf[member]] += set[member];
            }
        }
    }
}
