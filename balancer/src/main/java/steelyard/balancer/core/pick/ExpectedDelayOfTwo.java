package steelyard.balancer.core.pick;

/**
 * Of two distinct members drawn by effective weight, the one with the shorter expected delay, (in flight + 1) x mean service
 * time / weight; the first drawn when they are equal (Banawan, Zahorjan, INFOCOM 1989, from memory). {@link ServiceTimes} says
 * what the mean is.
 */
public final class ExpectedDelayOfTwo extends BetterOfTwo {
    private final ServiceTimes times;

    /** @param memoryNanos the time in which what was seen loses weight by a factor of e */
    public ExpectedDelayOfTwo(int members, Lots lots, long memoryNanos) {
        super(members, lots);
        times = new ServiceTimes(members, memoryNanos);
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        while (times.forgetOne(nowNanos) != NOBODY) {
            // Nothing is kept here that depends on who was forgotten.
        }
        return super.pick(request, attempt, key, tried, triedCount, nowNanos);
    }

    @Override
    boolean better(int second, int first) {
        return delay(second) < delay(first);
    }

    private double delay(int member) {
        return (inFlight[member] + 1.0) / weight[member] * times.mean(member);
    }

    @Override
    public void began(int member, int count, long nowNanos) {
        times.began(member, nowNanos);
        super.began(member, count, nowNanos);
    }

    @Override
    public void ended(int member, int count, boolean answered, long nowNanos) {
        times.ended(member, count, answered, nowNanos);
        super.ended(member, count, answered, nowNanos);
    }
}
