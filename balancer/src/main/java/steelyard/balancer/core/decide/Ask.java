package steelyard.balancer.core.decide;

import java.util.Arrays;

/**
 * What is asked when a backend is picked. One object serves all attempts at a request, refilled by its owner, so that a
 * pick allocates nothing. Not thread-safe.
 */
public final class Ask {
    private static final int[] NONE = {};

    /** The pool's number. */
    public int pool;

    /** The request's number; of a connection through a front of octets, its own, below 0. */
    public long request;

    /** From 1; attempt 1 is the first try, later ones are retries, which have turns of their own. */
    public int attempt = 1;

    /** {@link steelyard.balancer.core.pick.Keys} of what the method hashes; any value for other methods. */
    public long key;

    /** {@link steelyard.balancer.core.pick.Keys} of the client's address, where affinity goes by it. */
    public long client;

    /** The backend that the client's affinity cookie names, or {@link Decider#NOBODY}. */
    public int held = Decider.NOBODY;

    /** The backend that the client's connection follows, or {@link Decider#NOBODY}. */
    public int pinned = Decider.NOBODY;

    /** Of a try in a pool with a waiting queue: what {@link Orders#place} names it by; unique in the instance. */
    public long ticket;

    private int[] tried = NONE;
    private int triedCount;

    /** The first {@link #triedCount()} entries are backends already tried for this request. */
    int[] tried() {
        return tried;
    }

    public int triedCount() {
        return triedCount;
    }

    /** Whether a backend was tried for this request. */
    public boolean tried(int backend) {
        for (int i = 0; i < triedCount; i++) {
            if (tried[i] == backend) {
                return true;
            }
        }
        return false;
    }

    /** The attempt on this backend failed: the next one is made on another. */
    public void again(int backend) {
        if (triedCount == tried.length) {
            tried = Arrays.copyOf(tried, triedCount + 2);
        }
        tried[triedCount++] = backend;
        attempt++;
    }

    /** Whether an answer from this backend has to bind the client anew, since its cookie names another one or none. */
    public boolean rebinds(int backend) {
        return held != backend;
    }

    /** Becomes a copy of another one. */
    void become(Ask other) {
        pool = other.pool;
        request = other.request;
        attempt = other.attempt;
        key = other.key;
        client = other.client;
        held = other.held;
        pinned = other.pinned;
        ticket = other.ticket;
        triedCount = other.triedCount;
        if (tried.length < triedCount) {
            tried = new int[triedCount];
        }
        System.arraycopy(other.tried, 0, tried, 0, triedCount);
    }

    /** Clears what belongs to one request, so that the object can serve another one. */
    public void clear() {
        attempt = 1;
        triedCount = 0;
        held = Decider.NOBODY;
        pinned = Decider.NOBODY;
    }
}
