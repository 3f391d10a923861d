package steelyard.balancer.live.http;

import io.netty.util.concurrent.EventExecutor;
import java.util.function.Consumer;
import steelyard.balancer.live.tcp.Deadline;
import steelyard.balancer.settings.TimeoutSettings;

/** The time limits of one client connection, of which at most one runs. Used on its loop only. */
final class ClientClock {
    /** What is waited for. */
    enum Limit {
        /** Nothing. */
        NONE,
        /** A request. */
        IDLE,
        /** The rest of a head: counted from its first octet, so that trickling does not help. */
        HEAD,
        /** A further octet of content. */
        CONTENT,
        /** The end of the connection. */
        END
    }

    private final TimeoutSettings timeouts;
    private final Deadline deadline;
    private Limit running = Limit.NONE;

    /** @param passed told which limit is over; none runs then */
    ClientClock(EventExecutor loop, TimeoutSettings timeouts, Consumer<Limit> passed) {
        this.timeouts = timeouts;
        this.deadline = new Deadline(loop, () -> {
            Limit over = running;
            running = Limit.NONE;
            passed.accept(over);
        });
    }

    void idle() {
        run(Limit.IDLE, timeouts.idleNanos());
    }

    /** Starts the limit of a head, unless it runs already. */
    void head() {
        if (running != Limit.HEAD) {
            run(Limit.HEAD, timeouts.headNanos());
        }
    }

    /** Content is waited for; a further octet starts the limit again by {@link #clear} and this. */
    void content() {
        if (running != Limit.CONTENT) {
            run(Limit.CONTENT, timeouts.bodyNanos());
        }
    }

    /** The connection is to end within that time. */
    void end(long nanos) {
        run(Limit.END, nanos);
    }

    /** Nothing is waited for. */
    void clear() {
        running = Limit.NONE;
        deadline.clear();
    }

    /** The connection is closed. */
    void stop() {
        running = Limit.NONE;
        deadline.stop();
    }

    private void run(Limit limit, long nanos) {
        running = limit;
        deadline.in(nanos);
    }
}
