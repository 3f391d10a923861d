package steelyard.balancer.core.pick;

import java.util.List;

/**
 * Each key to the member that a table gives it to, and on to the next ones when that one cannot take it.
 *
 * <p>A member cannot take a key while it is full, or one that it was already tried for. Neither changes the table: no key of
 * others moves. It cannot take one either
 *
 * <ul>
 *   <li>while it warms up, unless the key is among those that it already has back: a uniform number made of key and name
 *       has to lie below the ramp fraction. So keys come back one by one, each once and for good, where a weight that grows in
 *       steps would take some back and forth;
 *   <li>where there is a bound, while it holds as much as it allows: the mean in flight, this unit of work included, in
 *       proportion to its weight, times the bound (Mirrokni, Thorup, Zadimoghaddam, SODA 2018).
 * </ul>
 *
 * <p>When nobody is left that way, the first that is not full and was not tried takes the key.
 *
 * <p>Cost of a pick: what the table's first step costs, plus a step for each member passed over; see {@link Ring}, {@link
 * Rendezvous} and {@link Permutation}. With a bound close to 1 many may be passed over. Nothing is allocated but when a table
 * is made anew.
 */
public final class Hash implements Picker {
    /** Makes the draw for a warming member another one than any of a table. */
    private static final int WARMING = 7;

    private final KeyTable table;
    private final long[] nameHash;
    private final Ramp ramp;
    private final double bound;
    private final long[] weight;
    private final int[] inFlight;
    private final boolean[] pickable;
    private final boolean[] full;
    private final boolean[] free;

    /** Of the members that may be picked. */
    private long allWeight;

    private long allInFlight;

    /** How many can take anything at all. */
    private int freeCount;

    private Hash(KeyTable table, long[] nameHash, double bound, Ramp ramp) {
        this.table = table;
        this.nameHash = nameHash;
        this.bound = bound;
        this.ramp = ramp;
        weight = new long[nameHash.length];
        inFlight = new int[nameHash.length];
        pickable = new boolean[nameHash.length];
        full = new boolean[nameHash.length];
        free = new boolean[nameHash.length];
        for (int member = 0; member < nameHash.length; member++) {
            weigh(member, MILLI);
        }
    }

    /**
     * Over a ring.
     *
     * @param names of the members; they alone say where points lie
     * @param pointsPerUnit points for each unit of weight
     * @param bound times the mean in flight, from 1; 0 for none
     */
    public static Hash overRing(List<String> names, int pointsPerUnit, double bound, Ramp ramp) {
        long[] nameHash = hashes(names);
        return new Hash(new Ring(nameHash, pointsPerUnit), nameHash, bound, ramp);
    }

    /** By the best lot; parameters as of {@link #overRing}. */
    public static Hash byRendezvous(List<String> names, double bound, Ramp ramp) {
        long[] nameHash = hashes(names);
        return new Hash(new Rendezvous(nameHash), nameHash, bound, ramp);
    }

    /**
     * Over a table of permutations; parameters as of {@link #overRing}.
     *
     * @param size of the table, a prime
     */
    public static Hash overPermutation(List<String> names, int size, double bound, Ramp ramp) {
        long[] nameHash = hashes(names);
        return new Hash(new Permutation(nameHash, size), nameHash, bound, ramp);
    }

    private static long[] hashes(List<String> names) {
        return names.stream().mapToLong(Keys::of).toArray();
    }

    @Override
    public int pick(long request, int attempt, long key, int[] tried, int triedCount, long nowNanos) {
        if (freeCount == 0) {
            return NOBODY;
        }
        for (int member = table.first(key); member != NOBODY; member = table.next()) {
            if (isFree(member, tried, triedCount) && hasRoom(member) && isBack(member, key, nowNanos)) {
                return member;
            }
        }
        int member = table.first(key);
        while (member != NOBODY && !isFree(member, tried, triedCount)) {
            member = table.next();
        }
        return member;
    }

    private boolean isFree(int member, int[] tried, int triedCount) {
        return free[member] && !Urn.among(member, tried, triedCount);
    }

    /** In flight below bound x (all in flight + 1) x share of the weights; no rounding up, since in flight is whole. */
    private boolean hasRoom(int member) {
        return bound == 0 || (double) inFlight[member] * allWeight < bound * (allInFlight + 1) * weight[member];
    }

    private boolean isBack(int member, long key, long nowNanos) {
        long fraction = ramp.fraction(member, nowNanos);
        return fraction >= Ramp.FULL || Draw.below(Ramp.FULL, Keys.of(key ^ nameHash[member], WARMING)) < fraction;
    }

    /** Keeps count of who can take anything, so that no walk is made where nobody can. */
    private void recount(int member) {
        boolean isFree = pickable[member] && !full[member] && weight[member] > 0;
        if (isFree != free[member]) {
            free[member] = isFree;
            freeCount += isFree ? 1 : -1;
        }
    }

    @Override
    public void enter(int member) {
        full[member] = false;
        if (!pickable[member]) {
            pickable[member] = true;
            allWeight += weight[member];
            allInFlight += inFlight[member];
            table.enter(member);
        }
        recount(member);
    }

    @Override
    public void leave(int member) {
        full[member] = false;
        if (pickable[member]) {
            pickable[member] = false;
            allWeight -= weight[member];
            allInFlight -= inFlight[member];
            table.leave(member);
        }
        recount(member);
    }

    @Override
    public void block(int member) {
        full[member] = true;
        recount(member);
    }

    @Override
    public void weigh(int member, long weightMilli) {
        allWeight += pickable[member] ? weightMilli - weight[member] : 0;
        weight[member] = weightMilli;
        table.weigh(member, weightMilli);
        recount(member);
    }

    @Override
    public void began(int member, int count, long nowNanos) {
        count(member, count);
    }

    @Override
    public void ended(int member, int count, boolean answered, long nowNanos) {
        count(member, count);
    }

    private void count(int member, int count) {
        allInFlight += pickable[member] ? count - inFlight[member] : 0;
        inFlight[member] = count;
    }

    @Override
    public boolean takesTurns() {
        return true;
    }
}
