package steelyard.balancer.core.standing;

import java.util.List;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.ReserveSettings;

/**
 * Who of one pool may be picked, as far as standings, tiers and the last resort go.
 *
 * <ol>
 *   <li>A member is able when its standing is one that may be picked: admitted, up and free.
 *   <li>Able members of tier 2 are picked from only while fewer than the standby share of all of tier 1 are able; those
 *       that people took out count among all, so that a drained tier is stood in for too.
 *   <li>While fewer than the last-resort share of the admitted members, of both tiers, are able, every admitted one is
 *       picked from: down, benched or standing by.
 * </ol>
 *
 * <p>A full member still counts here as one that may be picked: it is not ill, a place has to free. A member of tier 2
 * that is called upon begins no ramp, since it did not come back from anywhere. Not thread-safe.
 */
public final class Eligibility {
    /** Shares are compared with whole counts; what decimal fractions lose in binary must not decide. */
    private static final double SLACK = 1e-9;

    private final BackendStanding[] standings;
    private final boolean[] standsBy;
    private final ReserveSettings reserve;
    private final boolean[] able;
    private final boolean[] admitted;
    private final int firstTier;
    private int ableCount;
    private int ableOfFirstTier;
    private int admittedCount;
    private boolean standbyCalled;
    private boolean lastResort;

    /** @param standings of the pool's members */
    public Eligibility(BackendStanding[] standings, List<BackendSettings> members, ReserveSettings reserve) {
        this.standings = standings;
        this.reserve = reserve;
        able = new boolean[standings.length];
        admitted = new boolean[standings.length];
        standsBy = new boolean[standings.length];
        int first = 0;
        for (int member = 0; member < standings.length; member++) {
            standsBy[member] = members.get(member).tier() == 2;
            first += standsBy[member] ? 0 : 1;
        }
        firstTier = first;
        for (int member = 0; member < standings.length; member++) {
            note(member);
        }
        judge();
    }

    /** Whether new work may be given to a member. */
    public boolean open(int member) {
        return lastResort ? admitted[member] : able[member] && (!standsBy[member] || standbyCalled);
    }

    /**
     * Takes over what changed in a member's standing.
     *
     * @return whether that changed what holds for the other members too
     */
    public boolean changed(int member) {
        boolean calledBefore = standbyCalled;
        boolean lastBefore = lastResort;
        note(member);
        judge();
        return standbyCalled != calledBefore || lastResort != lastBefore;
    }

    private void note(int member) {
        boolean isAble = standings[member].shown().pickable();
        boolean isAdmitted = standings[member].admitted();
        int more = (isAble ? 1 : 0) - (able[member] ? 1 : 0);
        ableCount += more;
        ableOfFirstTier += standsBy[member] ? 0 : more;
        admittedCount += (isAdmitted ? 1 : 0) - (admitted[member] ? 1 : 0);
        able[member] = isAble;
        admitted[member] = isAdmitted;
    }

    private void judge() {
        standbyCalled = ableOfFirstTier < reserve.standby() * firstTier - SLACK;
        lastResort = ableCount < reserve.lastResort() * admittedCount - SLACK;
    }
}
