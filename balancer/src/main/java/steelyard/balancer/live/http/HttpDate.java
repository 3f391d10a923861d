package steelyard.balancer.live.http;

import io.netty.handler.codec.DateFormatter;
import java.time.Clock;
import java.util.Date;

/**
 * The Date field (RFC 9110, 6.6.1): the one place of the balancer that reads the wall clock, since the field is wall
 * time by definition. Nothing is decided or measured by it. Thread-safe.
 */
final class HttpDate {
    private static final Clock CLOCK = Clock.systemUTC();
    private static volatile Second current = new Second(Long.MIN_VALUE, "");

    private HttpDate() {}

    static String now() {
        long millis = CLOCK.millis();
        long second = Math.floorDiv(millis, 1000L);
        Second known = current;
        if (known.second != second) {
            known = new Second(second, DateFormatter.format(new Date(millis)));
            current = known;
        }
        return known.text;
    }

    private record Second(long second, String text) {}
}
