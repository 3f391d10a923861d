package steelyard.harness.judge;

import java.util.EnumSet;
import java.util.Set;
import steelyard.drills.model.Cue;
import steelyard.harness.record.Cast;

/**
 * Base of the meters that count from the instant at which a cue was applied, for every member of a target, up to the
 * member's next cue. The end of a {@code for:} is a cue too; a surge acts on traffic and ends nothing. Next is a cue that
 * was due later: two of one instant belong together.
 */
abstract class SinceCue extends Meter {
    private final String after;
    private final Cast cast;
    private final int[] members;
    private final boolean[] closed;
    private boolean begun;
    private long dueNanos;
    private long beginNanos;

    SinceCue(String after, int[] members, Cast cast) {
        this.after = after;
        this.cast = cast;
        this.members = members;
        closed = new boolean[members.length];
    }

    @Override
    Set<Hears> hears() {
        return EnumSet.of(Hears.CUES);
    }

    @Override
    public final void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        if (begun && dueNanos > this.dueNanos) {
            next(atNanos, cue);
        } else if (!begun && by != By.END && cue.name().equals(after)) {
            begun = true;
            this.dueNanos = dueNanos;
            beginNanos = atNanos;
            begin();
        }
        applied(atNanos, cue, by);
    }

    @Override
    public final void ended(long atNanos, boolean complete) {
        if (begun) {
            for (int member = 0; member < members.length; member++) {
                closeOnce(member, atNanos);
            }
        }
    }

    @Override
    final Reading read() {
        if (!begun) {
            return Reading.notMeasured("the cue " + after + " was not applied");
        }
        Reading last = Reading.notMeasured("no backend was looked at");
        for (int member = 0; member < members.length; member++) {
            Reading each = member(member);
            if (!each.hasValue()) {
                return each;
            }
            last = last.hasValue() && last.value() >= each.value() ? last : each;
        }
        return last;
    }

    final Cast cast() {
        return cast;
    }

    /** Number of the backend that a member is. */
    final int backend(int member) {
        return members[member];
    }

    final int members() {
        return members.length;
    }

    final String name(int member) {
        return cast.backends().get(members[member]).name();
    }

    /** The member that a backend is, if its time runs; otherwise -1. */
    final int running(int backend) {
        int member = begun ? memberOf(backend) : -1;
        return member >= 0 && !closed[member] ? member : -1;
    }

    /** When the cue was due. */
    final long dueNanos() {
        return dueNanos;
    }

    /** When the cue was applied. */
    final long beginNanos() {
        return beginNanos;
    }

    /** Since the cue was applied. */
    final long since(long atNanos) {
        return atNanos - beginNanos;
    }

    /** The cue was applied: time runs for every member. */
    abstract void begin();

    /** Some cue was applied; for a meter that follows what cues do to backends. */
    void applied(long atNanos, Cue cue, By by) {}

    /** Whether a cue that was due later ends a member's time. */
    boolean endsMember(int member, Cue cue, int[] targets) {
        return cue.kind().side() != Cue.Side.TRAFFIC && contains(targets, members[member]);
    }

    /** A member's time is over. */
    abstract void close(int member, long atNanos);

    /** What a member measured, once its time is over. */
    abstract Reading member(int member);

    static boolean contains(int[] numbers, int number) {
        for (int each : numbers) {
            if (each == number) {
                return true;
            }
        }
        return false;
    }

    private void next(long atNanos, Cue cue) {
        int[] targets = cast.numbers(cue.target());
        for (int member = 0; member < members.length; member++) {
            if (endsMember(member, cue, targets)) {
                closeOnce(member, atNanos);
            }
        }
    }

    private void closeOnce(int member, long atNanos) {
        if (!closed[member]) {
            close(member, atNanos);
            closed[member] = true;
        }
    }

    private int memberOf(int backend) {
        for (int member = 0; member < members.length; member++) {
            if (members[member] == backend) {
                return member;
            }
        }
        return -1;
    }
}
