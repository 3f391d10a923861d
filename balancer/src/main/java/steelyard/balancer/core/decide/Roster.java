package steelyard.balancer.core.decide;

import java.util.Arrays;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.pick.HostPlaces;
import steelyard.balancer.core.standing.BackendStanding;
import steelyard.balancer.core.standing.ProbeTracker;
import steelyard.balancer.core.standing.Transition;
import steelyard.balancer.core.weigh.LoadReader;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;

/**
 * Who there is: every backend of the instance by its number, with its pool's desk, its standing and its load readings, and
 * when each has something due.
 */
final class Roster {
    final DecisionSink sink;
    final Orders orders;
    final PoolDesk[] desks;
    /** Of each backend, then of the line of each pool. */
    final Deadlines deadlines;

    final int[] hostWeights;
    final HostPlaces firstPlaces;
    final HostPlaces againPlaces;
    private final BackendStanding[] standings;
    private final @Nullable LoadReader[] readers;
    private final int[] poolOf;
    private final int[] firstOfPool;

    Roster(BalancerSettings settings, Chance chance, DecisionSink sink, Orders orders, long nowNanos) {
        this.sink = sink;
        this.orders = orders;
        int backends = settings.backends().size();
        int pools = settings.pools().size();
        poolOf = new int[backends];
        standings = new BackendStanding[backends];
        readers = new @Nullable LoadReader[backends];
        desks = new PoolDesk[pools];
        firstOfPool = new int[pools];
        deadlines = new Deadlines(backends + pools);
        hostWeights = settings.hosts().stream().mapToInt(HostSettings::weight).toArray();
        firstPlaces = new HostPlaces(hostWeights);
        againPlaces = new HostPlaces(hostWeights);
        int first = 0;
        for (int pool = 0; pool < pools; pool++) {
            firstOfPool[pool] = first;
            first = open(pool, settings.pools().get(pool), first, chance, nowNanos);
        }
        for (int backend = 0; backend < backends; backend++) {
            reschedule(backend, nowNanos);
        }
    }

    private int open(int pool, PoolSettings settings, int first, Chance chance, long nowNanos) {
        List<BackendSettings> members = settings.backends();
        int next = first + members.size();
        Arrays.fill(poolOf, first, next, pool);
        for (int backend = first; backend < next; backend++) {
            boolean startsUp = !members.get(backend - first).startsDown();
            ProbeTracker probes = probes(settings.probe(), backend, startsUp, chance, nowNanos);
            standings[backend] = new BackendStanding(backend, probes, startsUp, settings.warmUp(), settings.bench());
            readers[backend] = reader(settings.load(), backend, chance, nowNanos);
        }
        desks[pool] = new PoolDesk(
                settings,
                Arrays.copyOfRange(standings, first, next),
                members.stream().mapToInt(BackendSettings::weight).toArray(),
                members.stream().mapToInt(BackendSettings::host).toArray(),
                hostWeights,
                firstPlaces,
                againPlaces,
                chance,
                nowNanos);
        return next;
    }

    private static @Nullable ProbeTracker probes(
            @Nullable ProbeSettings settings, int backend, boolean startsUp, Chance chance, long nowNanos) {
        if (settings == null) {
            return null;
        }
        long phaseNanos = (long) (chance.unit(Chance.Draw.PROBE_PHASE, backend, 0) * settings.everyNanos());
        return new ProbeTracker(
                settings,
                startsUp,
                nowNanos + phaseNanos,
                probe -> chance.unit(Chance.Draw.PROBE_JITTER, backend, probe));
    }

    private static @Nullable LoadReader reader(
            @Nullable LoadSettings settings, int backend, Chance chance, long nowNanos) {
        if (settings == null) {
            return null;
        }
        long phaseNanos = (long) (chance.unit(Chance.Draw.READING_PHASE, backend, 0) * settings.everyNanos());
        return new LoadReader(settings, nowNanos + phaseNanos);
    }

    int backends() {
        return standings.length;
    }

    int poolOf(int backend) {
        return poolOf[backend];
    }

    PoolDesk deskOf(int backend) {
        return desks[poolOf[backend]];
    }

    /** A backend's place in its pool. */
    int member(int backend) {
        return backend - firstOfPool[poolOf[backend]];
    }

    int firstOf(int pool) {
        return firstOfPool[pool];
    }

    /** One past the last backend of a pool. */
    int endOf(int pool) {
        return pool + 1 == firstOfPool.length ? standings.length : firstOfPool[pool + 1];
    }

    BackendStanding standing(int backend) {
        return standings[backend];
    }

    /** Null for a backend whose load is not read. */
    @Nullable
    LoadReader reader(int backend) {
        return readers[backend];
    }

    /** Takes over and tells a change of standing, if it is one. */
    void stood(int backend, @Nullable Transition change, long nowNanos) {
        if (change != null) {
            deskOf(backend).stood(member(backend), nowNanos);
            sink.stood(change);
        }
    }

    /** A backend's next instant may have moved. */
    void reschedule(int backend, long nowNanos) {
        LoadReader reader = readers[backend];
        BackendStanding standing = standings[backend];
        if (!standing.hasDeadline() && reader == null) {
            deadlines.clear(backend);
            return;
        }
        long soonest = standing.hasDeadline() ? standing.deadlineNanos(nowNanos) - nowNanos : Long.MAX_VALUE;
        if (reader != null) {
            soonest = Math.min(soonest, reader.deadlineNanos() - nowNanos);
        }
        deadlines.set(backend, nowNanos + soonest);
    }

    /** The front of a pool's line may have moved. */
    void rescheduleLine(int pool) {
        WaitingLine line = desks[pool].line;
        int place = standings.length + pool;
        if (line.waiting() == 0) {
            deadlines.clear(place);
        } else {
            deadlines.set(place, line.untilNanos(0));
        }
    }
}
