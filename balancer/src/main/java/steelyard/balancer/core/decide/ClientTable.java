package steelyard.balancer.core.decide;

import java.util.Arrays;

/**
 * Which backend each client is held to, by the client's key: the most recent clients, each for as long as affinity lasts
 * after it was last seen.
 *
 * <p>A hash table with chains, threaded by a list from the newest to the oldest, all in arrays that double until the most is
 * reached; from then on a new client takes the place of the one that stayed away longest. Each call takes a step or two.
 */
final class ClientTable {
    /** Clients that a pool remembers at most. */
    static final int MOST = 65_536;

    private static final int NONE = -1;

    private final long lastsNanos;
    private final int most;
    private int[] chainHead = new int[0];
    private long[] client = new long[0];
    private int[] backend = new int[0];
    private long[] seenNanos = new long[0];
    private int[] chained = new int[0];
    private int[] newer = new int[0];
    private int[] older = new int[0];
    private int count;
    private int newest = NONE;
    private int oldest = NONE;

    /** @param most clients remembered, a power of two */
    ClientTable(long lastsNanos, int most) {
        this.lastsNanos = lastsNanos;
        this.most = most;
        resize(Math.min(most, 64));
    }

    /** The backend that a client is held to, or {@link Decider#NOBODY} for one unknown or away for too long. */
    int heldBy(long key, long nowNanos) {
        int entry = find(key);
        return entry == NONE || nowNanos - seenNanos[entry] >= lastsNanos ? Decider.NOBODY : backend[entry];
    }

    /** The client was given to a backend now, and is held to it. */
    void hold(long key, int to, long nowNanos) {
        int entry = find(key);
        if (entry == NONE) {
            entry = enter(key);
        } else {
            unlink(entry);
        }
        backend[entry] = to;
        seenNanos[entry] = nowNanos;
        link(entry);
    }

    int size() {
        return count;
    }

    private int find(long key) {
        int entry = chainHead[chainOf(key)];
        while (entry != NONE && client[entry] != key) {
            entry = chained[entry];
        }
        return entry;
    }

    private int enter(long key) {
        int entry;
        if (count == most) {
            entry = oldest;
            unlink(entry);
            unchain(entry);
        } else {
            if (count == client.length) {
                resize(2 * count);
            }
            entry = count++;
        }
        client[entry] = key;
        chain(entry);
        return entry;
    }

    private void chain(int entry) {
        int chain = chainOf(client[entry]);
        chained[entry] = chainHead[chain];
        chainHead[chain] = entry;
    }

    private void unchain(int entry) {
        int chain = chainOf(client[entry]);
        if (chainHead[chain] == entry) {
            chainHead[chain] = chained[entry];
            return;
        }
        int before = chainHead[chain];
        while (chained[before] != entry) {
            before = chained[before];
        }
        chained[before] = chained[entry];
    }

    private void link(int entry) {
        older[entry] = newest;
        newer[entry] = NONE;
        if (newest == NONE) {
            oldest = entry;
        } else {
            newer[newest] = entry;
        }
        newest = entry;
    }

    private void unlink(int entry) {
        if (newer[entry] == NONE) {
            newest = older[entry];
        } else {
            older[newer[entry]] = older[entry];
        }
        if (older[entry] == NONE) {
            oldest = newer[entry];
        } else {
            newer[older[entry]] = newer[entry];
        }
    }

    /** Keys are hashes already: their low bits are as good as any. */
    private int chainOf(long key) {
        return (int) key & chainHead.length - 1;
    }

    private void resize(int size) {
        client = Arrays.copyOf(client, size);
        backend = Arrays.copyOf(backend, size);
        seenNanos = Arrays.copyOf(seenNanos, size);
        chained = Arrays.copyOf(chained, size);
        newer = Arrays.copyOf(newer, size);
        older = Arrays.copyOf(older, size);
        chainHead = new int[2 * size];
        Arrays.fill(chainHead, NONE);
        for (int entry = 0; entry < count; entry++) {
            chain(entry);
        }
    }
}
