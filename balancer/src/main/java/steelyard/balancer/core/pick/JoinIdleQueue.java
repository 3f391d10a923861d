package steelyard.balancer.core.pick;

/**
 * The member that has been idle for longest, and while none is idle one by lot, by effective weight (Lu, Xie, Kliot, Geller,
 * Larus, Greenberg, Performance Evaluation 68(11) 2011).
 *
 * <p>Idle is who has nothing in flight. Idle members stand in line in the order in which they became so; a member that comes
 * in idle joins at the end. Weights, and with them ramps, count for the lots only: an idle member takes what comes, one unit
 * of work at a time.
 */
public final class JoinIdleQueue extends LotsPicker {
    private final Line idle;

    public JoinIdleQueue(int members, Lots lots) {
        super(members, lots);
        idle = new Line(members);
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        int member = idle.head();
        while (member != NOBODY && Urn.among(member, tried, triedCount)) {
            member = idle.after(member);
        }
        return member == NOBODY ? draw(request, attempt, tried, triedCount) : member;
    }

    @Override
    void changed(int member) {
        super.changed(member);
        boolean isIdle = isIn(member) && inFlight[member] == 0;
        if (isIdle && !idle.has(member)) {
            idle.join(member);
        } else if (!isIdle) {
            idle.leave(member);
        }
    }
}
