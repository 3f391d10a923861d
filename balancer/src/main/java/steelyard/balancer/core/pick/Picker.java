package steelyard.balancer.core.pick;

/**
 * A method at work in one pool: picks a member for one unit of work.
 *
 * <p>Members are known by their place in the pool's list. The Decider tells a picker who may be picked, what weighs how
 * much and, where it matters, what is in flight; a picker tells who is next. Nothing is ever reset: what a change does to
 * turns that were under way is each method's own rule.
 *
 * <p>Cost: every call takes at most a few times log2(members) steps and allocates nothing, but for the turns of warming
 * members that pass unserved and for what {@link Hash} says of its tables. Owned by one Decider; not thread-safe.
 */
public interface Picker {
    /** What {@link #pick} says when no member may be picked. */
    int NOBODY = Tournament.NOBODY;

    /** One thousandth: the unit of weights. */
    int MILLI = 1000;

    /**
     * Picks a member and counts its turn.
     *
     * @param request the request's number, by which a method that draws lots draws
     * @param attempt from 1, likewise
     * @param key of what the method hashes; any value for one that does not
     * @param tried members that this pick leaves out, in its first {@code triedCount} entries
     * @param nowNanos the instant, for members that warm up
     * @return the member, or {@link #NOBODY}; ties as the method's own class says
     */
    int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos);

    /** A member becomes pickable. */
    void enter(int member);

    /** A member stops being pickable. */
    void leave(int member);

    /**
     * A member that may be picked is full: it is passed over until {@link #enter} or {@link #leave} is told of it. To most
     * methods this is a member that left.
     */
    default void block(int member) {
        leave(member);
    }

    /**
     * A member's weight changed.
     *
     * @param weightMilli in thousandths; 0 is never picked by a method that weighs
     */
    void weigh(int member, long weightMilli);

    /** An attempt begins on a member, whoever picked it; {@code count} are now in flight there. */
    default void began(int member, int count, long nowNanos) {}

    /**
     * An attempt ended on a member; {@code count} are still in flight there.
     *
     * @param answered whether a whole answer came, of whatever status
     */
    default void ended(int member, int count, boolean answered, long nowNanos) {}

    /**
     * Whether a warming member is held back by passing turns, on the ramp that the picker was made with; otherwise the
     * Decider ramps the weight it tells.
     */
    boolean takesTurns();

    /** Whether set weights play a part; where not, everybody is told the weight of one, ramped as {@link #takesTurns} says. */
    default boolean weighs() {
        return true;
    }
}
