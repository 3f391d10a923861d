package steelyard.harness.stage.live;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.List;
import java.util.function.Consumer;
import org.jspecify.annotations.Nullable;

/**
 * The open requests, by when their clients give up. All clients of a stream wait equally long from the due time, so a
 * line per stream is in order of time already. Lives on the generator's loop.
 */
final class GiveUps {
    private final List<ArrayDeque<Exchange>> lines = new ArrayList<>();

    GiveUps(int streams) {
        for (int i = 0; i < streams; i++) {
            lines.add(new ArrayDeque<>());
        }
    }

    void add(Exchange exchange) {
        lines.get(exchange.traffic).addLast(exchange);
    }

    /** When the next client gives up; {@link Long#MAX_VALUE} when none waits. */
    long nextNanos() {
        long next = Long.MAX_VALUE;
        for (ArrayDeque<Exchange> line : lines) {
            Exchange head = head(line);
            next = head == null ? next : Math.min(next, head.deadlineNanos);
        }
        return next;
    }

    /** Hands out every request whose client has waited long enough by {@code nowNanos}. */
    void expire(long nowNanos, Consumer<Exchange> givenUp) {
        for (ArrayDeque<Exchange> line : lines) {
            for (Exchange head = head(line); head != null && head.deadlineNanos <= nowNanos; head = head(line)) {
                line.removeFirst();
                givenUp.accept(head);
            }
        }
    }

    private static @Nullable Exchange head(ArrayDeque<Exchange> line) {
        Exchange head = line.peekFirst();
        while (head != null && head.hasEnded()) {
            line.removeFirst();
            head = line.peekFirst();
        }
        return head;
    }
}
