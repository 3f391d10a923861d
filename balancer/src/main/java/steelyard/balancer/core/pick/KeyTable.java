package steelyard.balancer.core.pick;

/**
 * Whom each key belongs to, and whom it passes to when that one cannot take it.
 *
 * <p>A table knows members by numbers that never change, and places them by their names: where a key belongs depends only on
 * who is in, on what they weigh and on the key, never on what happened before. So a member that leaves and comes back finds
 * its keys again, all of them and no others.
 */
interface KeyTable {
    /** What a walk says when it is over. */
    int NOBODY = Tournament.NOBODY;

    /** A member comes in; harmless when it is in. */
    void enter(int member);

    /** A member goes out; harmless when it is not in. */
    void leave(int member);

    /** Sets what a member weighs, in thousandths; with 0 it owns no key. */
    void weigh(int member, long weightMilli);

    /** Begins a walk over the members that are in and weigh anything, and says whom the key belongs to, or NOBODY. */
    int first(long key);

    /**
     * Whom the key of the walk passes to next, or NOBODY when everybody has come. A member may come more than once. Between
     * {@link #first} and this no other call is made.
     */
    int next();
}
