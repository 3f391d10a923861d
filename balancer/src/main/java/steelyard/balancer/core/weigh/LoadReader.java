package steelyard.balancer.core.weigh;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Rounds;
import steelyard.balancer.settings.LoadSettings;

/**
 * Readings of one backend's load page: when the next one starts, and what the last one makes of the weight.
 *
 * <p>A reading starts {@code every} after the last one started, or when that one ended if that is later; never two at once.
 * It counts when it comes earlier than {@code within} after its start and every gauge that matters is on the page: a
 * headroom of which one gauge is unknown is itself unknown. One that does not count changes nothing; what was read last
 * stands until it is stale, and then the set weight does.
 *
 * <pre>
 *               a reading counts                      stale-after since the last that counted
 *   nothing known  ---------->  fresh: its headroom  ---------->  nothing known: full headroom
 * </pre>
 */
public final class LoadReader {

    /** What a call asks of whoever drives it. */
    public enum Step {
        NOTHING,
        /** Start reading {@link #number()}. */
        START,
        /** Reading {@link #number()} ran out of time; stop waiting for it. */
        DROP,
        /** The last reading that counted is too old: the set weight stands again. */
        STALE
    }

    private final LoadSettings settings;
    private final Rounds rounds;
    private boolean fresh;
    private long readNanos;
    private int headroomMilli = Headroom.FULL;

    /** @param firstStartNanos when the first reading starts */
    public LoadReader(LoadSettings settings, long firstStartNanos) {
        this.settings = settings;
        rounds = new Rounds(firstStartNanos);
    }

    /** The number of the reading that runs or ran last, from 0; -1 before the first. */
    public long number() {
        return rounds.number();
    }

    /** Whether a reading counts now. */
    public boolean fresh() {
        return fresh;
    }

    /** In thousandths of the set weight; {@link Headroom#FULL} while nothing fresh is known. */
    public int headroomMilli() {
        return headroomMilli;
    }

    /** When {@link #poll} has something to do next. */
    public long deadlineNanos() {
        long next = rounds.deadlineNanos(settings.withinNanos());
        return fresh && staleNanos() - next < 0 ? staleNanos() : next;
    }

    /** Does one thing that is due; call again until it says {@link Step#NOTHING}. */
    public Step poll(long nowNanos) {
        if (nowNanos - deadlineNanos() < 0) {
            return Step.NOTHING;
        }
        if (fresh && nowNanos - staleNanos() >= 0) {
            fresh = false;
            headroomMilli = Headroom.FULL;
            return Step.STALE;
        }
        if (rounds.running()) {
            end(nowNanos);
            return Step.DROP;
        }
        rounds.start(nowNanos);
        return Step.START;
    }

    /**
     * What a reading said. One that is over is ignored.
     *
     * @param gauges in the settings' order, NaN for one that the page lacks; null for a reading that failed
     * @return whether it counted
     */
    public boolean read(long reading, double @Nullable [] gauges, long nowNanos) {
        if (!rounds.runs(reading)) {
            return false;
        }
        boolean early = rounds.early(settings.withinNanos(), nowNanos);
        end(nowNanos);
        if (!early || gauges == null || !complete(gauges)) {
            return false;
        }
        fresh = true;
        readNanos = nowNanos;
        headroomMilli = Headroom.milli(settings, gauges);
        return true;
    }

    private boolean complete(double[] gauges) {
        if (gauges.length != settings.gauges().size()) {
            throw new IllegalArgumentException(
                    gauges.length + " gauges were read, " + settings.gauges().size() + " are asked for");
        }
        for (double each : gauges) {
            if (Double.isNaN(each)) {
                return false;
            }
        }
        return true;
    }

    private long staleNanos() {
        return readNanos + settings.staleAfterNanos();
    }

    private void end(long nowNanos) {
        rounds.end(settings.everyNanos(), nowNanos);
    }
}
