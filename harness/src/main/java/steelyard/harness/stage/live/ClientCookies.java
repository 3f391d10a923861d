package steelyard.harness.stage.live;

import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaders;
import io.netty.handler.codec.http.cookie.ClientCookieDecoder;
import io.netty.handler.codec.http.cookie.Cookie;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import java.util.function.LongSupplier;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;

/**
 * The cookies that one client was given, by name; whatever their path, since they all come from one pool. Lives on the
 * generator's loop.
 */
final class ClientCookies {
    /** The longest that a cookie is kept: a century and a half, which adds to any instant without going round. */
    private static final long LONGEST_SECONDS = TimeUnit.NANOSECONDS.toSeconds(Long.MAX_VALUE / 2);

    private record Kept(String value, long untilNanos) {}

    private final LongSupplier nanoClock;
    private final Map<String, Kept> kept = new LinkedHashMap<>();
    private @Nullable String field;
    private long nextEndNanos;

    /** @param nanoClock what cookies run out by (RFC 6265, 5.3: Max-Age) */
    ClientCookies(LongSupplier nanoClock) {
        this.nanoClock = nanoClock;
    }

    /** Keeps, or drops, what an answer gives. */
    void take(HttpHeaders answer) {
        if (!answer.contains(HttpHeaderNames.SET_COOKIE)) {
            return;
        }
        long now = nanoClock.getAsLong();
        for (String given : answer.getAll(HttpHeaderNames.SET_COOKIE)) {
            Cookie cookie = ClientCookieDecoder.LAX.decode(given);
            if (cookie != null && cookie.maxAge() <= 0 && cookie.maxAge() != Cookie.UNDEFINED_MAX_AGE) {
                kept.remove(cookie.name());
            } else if (cookie != null) {
                kept.put(cookie.name(), new Kept(cookie.value(), now + nanos(cookie.maxAge())));
            }
        }
        renew(now);
    }

    /** One without Max-Age lasts as long as its client. */
    private static long nanos(long maxAge) {
        return TimeUnit.SECONDS.toNanos(
                maxAge == Cookie.UNDEFINED_MAX_AGE ? LONGEST_SECONDS : Math.min(maxAge, LONGEST_SECONDS));
    }

    private void renew(long now) {
        nextEndNanos = now + Long.MAX_VALUE / 2;
        for (Kept each : kept.values()) {
            if (each.untilNanos() - nextEndNanos < 0) {
                nextEndNanos = each.untilNanos();
            }
        }
        field = kept.isEmpty()
                ? null
                : kept.entrySet().stream()
                        .map(each -> each.getKey() + "=" + each.getValue().value())
                        .collect(Collectors.joining("; "));
    }

    /** Shows them in a request, behind those that it has already (RFC 6265, 5.4: one field). */
    void show(HttpHeaders request) {
        if (field != null) {
            dropEnded(nanoClock.getAsLong());
        }
        if (field != null) {
            String own = request.get(HttpHeaderNames.COOKIE);
            request.set(HttpHeaderNames.COOKIE, own == null ? field : own + "; " + field);
        }
    }

    private void dropEnded(long now) {
        if (now - nextEndNanos >= 0) {
            kept.values().removeIf(each -> now - each.untilNanos() >= 0);
            renew(now);
        }
    }
}
