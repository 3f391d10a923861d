package steelyard.balancer.live.http;

import io.netty.handler.codec.http.HttpHeaders;
import java.util.concurrent.atomic.AtomicLong;

/** The number of a request: the client's own, or else a negative one that the balancer counts down. Thread-safe. */
final class RequestNumbers {
    private static final int MOST_DIGITS = 18; // whatever has no more fits a long

    private final AtomicLong own;

    /** @param own counted down from -1, shared with whatever else brings no number */
    RequestNumbers(AtomicLong own) {
        this.own = own;
    }

    long of(HttpHeaders headers) {
        String given = headers.get(Fields.REQUEST);
        long number = given == null ? -1 : parse(given);
        return number >= 0 ? number : own.decrementAndGet();
    }

    /** -1 for whatever is not a plain decimal number. */
    private static long parse(String text) {
        int length = text.length();
        if (length == 0 || length > MOST_DIGITS) {
            return -1;
        }
        long number = 0;
        for (int i = 0; i < length; i++) {
            int digit = text.charAt(i) - '0';
            if (digit < 0 || digit > 9) {
                return -1;
            }
            number = number * 10 + digit;
        }
        return number;
    }
}
