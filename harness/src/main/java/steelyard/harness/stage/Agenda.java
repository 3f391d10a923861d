package steelyard.harness.stage;

/** What is to happen in a play, in order of time; polled by the stage that plays it. */
public interface Agenda {

    /** Whether anything is still to come. */
    boolean hasNext();

    /** Play time of what comes next. May move earlier when a person sends a cue. */
    long nextNanos();

    /** Hands out, in order, everything that is due at {@code nowNanos}, at most {@code limit} things. */
    void poll(long nowNanos, Hands hands, int limit);
}
