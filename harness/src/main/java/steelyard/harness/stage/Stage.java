package steelyard.harness.stage;

import steelyard.harness.record.PlayListener;

/**
 * Something that a drill can be played on.
 *
 * <p>Life: {@link #open}, {@link #play} once, {@link #close}. A stage tells everything that happens to the one {@link
 * PlayListener} that it was opened with.
 */
public interface Stage extends AutoCloseable {

    /**
     * Brings backends and balancer up, so that play can begin at once.
     *
     * @throws CannotPlay when this machine cannot, with one line that says why and what to do
     */
    void open(PlayListener listener) throws CannotPlay;

    /**
     * Plays an agenda from play time 0 until it has nothing more and every request has ended; blocks until then. The
     * agenda is polled by one thread at a time, never before its next instant.
     *
     * @throws CannotPlay when the play cannot go on
     */
    void play(Agenda agenda) throws CannotPlay;

    /** Ends the play soon: nothing new is sent, what is open is abandoned. Any thread; harmless when nothing plays. */
    void interrupt();

    /** Closes traffic, then balancer, then backends; reports all failures together. */
    @Override
    void close();
}
