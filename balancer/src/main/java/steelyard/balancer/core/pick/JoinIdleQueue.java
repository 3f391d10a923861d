package steelyard.balancer.core.pick;

/**
 * The member that has been idle for longest, and while none is idle one by lot (Lu, Xie, Kliot, Geller, Larus, Greenberg,
 * Performance Evaluation 68(11) 2011).
 *
 * <p>Idle is who has nothing in flight. Idle members stand in line in the order in which they became so; a member that comes
 * in idle joins at the end. Set weights play no part: with idle members about, work goes round evenly whatever anybody weighs.
 * A ramp counts for the lots only, since an idle member takes no more than one unit of work before it has to join again.
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

    @Override
    public boolean weighs() {
        return false;
    }
}
