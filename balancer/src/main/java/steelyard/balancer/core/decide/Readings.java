package steelyard.balancer.core.decide;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.weigh.LoadReader;

/** Orders readings of load pages as they are due and makes weights of what they say. */
final class Readings {
    private final Roster roster;

    Readings(Roster roster) {
        this.roster = roster;
    }

    /** Does one thing that a backend's readings have due. */
    void poll(int backend, long nowNanos) {
        LoadReader reader = roster.reader(backend);
        if (reader == null) {
            return;
        }
        switch (reader.poll(nowNanos)) {
            case NOTHING -> {}
            case START -> roster.orders.startReading(backend, reader.number());
            case DROP -> roster.orders.dropReading(backend, reader.number());
            case STALE -> settle(backend, reader, nowNanos);
        }
    }

    void read(int backend, long number, double @Nullable [] gauges, long nowNanos) {
        LoadReader reader = roster.reader(backend);
        if (reader == null) {
            return;
        }
        if (reader.read(number, gauges, nowNanos)) {
            settle(backend, reader, nowNanos);
        }
        roster.reschedule(backend, nowNanos);
    }

    private void settle(int backend, LoadReader reader, long nowNanos) {
        roster.deskOf(backend).headroom(roster.member(backend), reader.headroomMilli(), nowNanos);
        roster.sink.loadRead(nowNanos, backend, reader.number(), reader.headroomMilli(), reader.fresh());
    }
}
