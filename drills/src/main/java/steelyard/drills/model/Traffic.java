package steelyard.drills.model;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/**
 * One stream of open-loop requests to a pool.
 *
 * @param pool the name of the pool it goes to
 * @param steps rates, one after the other; the last one holds to the end of the play
 * @param clients distinct clients, at least 1
 * @param skew exponent of the law (k^-skew, Zipf) by which clients share the requests; 0 shares evenly
 * @param giveUpNanos a client waits that long from the due time
 * @param requests the mix, at least one; shares sum to 1
 */
public record Traffic(
        String pool,
        Arrivals arrivals,
        List<Step> steps,
        int clients,
        double skew,
        long giveUpNanos,
        List<Request> requests) {

    public Traffic {
        steps = List.copyOf(steps);
        requests = List.copyOf(requests);
        Check.that(!steps.isEmpty(), "traffic needs a rate");
        Check.positive(clients, "clients");
        Check.that(skew >= 0, "skew cannot be negative: %s", skew);
        Check.positive(giveUpNanos, "give-up");
        double sum = requests.stream().mapToDouble(Request::share).sum();
        Check.that(Math.abs(sum - 1) < 1e-9, "request shares sum to 1, not %s", sum);
    }

    /** How due times follow each other. */
    public enum Arrivals implements Worded {
        POISSON("poisson"),
        EVEN("even");

        private final String word;

        Arrivals(String word) {
            this.word = word;
        }

        @Override
        public String word() {
            return word;
        }
    }

    /**
     * A rate for a while.
     *
     * @param forNanos how long it holds, above zero
     * @param perSecond requests a second, at least 0
     */
    public record Step(long forNanos, double perSecond) {
        public Step {
            Check.positive(forNanos, "for");
            Check.that(perSecond >= 0, "a rate cannot be negative: %s", perSecond);
        }
    }

    /**
     * One kind of request of the mix.
     *
     * @param method in capitals, as on the wire
     * @param path origin form, begins with a slash; {@link #CLIENT} in it stands for the number of the client
     * @param share of the requests, from 0 to 1
     * @param bodyBytes size of the request body
     * @param good statuses that count as good; empty for any below 500
     * @param headers fields of its head in the order of the file, name to value; {@link #CLIENT} as in the path
     * @param upgrade the protocol that it asks to go over to (RFC 9110 section 7.8), or null for an ordinary request
     * @param openNanos how long the tunnel stays open after the 101; 0 of an ordinary request, else above zero
     */
    public record Request(
            String method,
            String path,
            double share,
            int bodyBytes,
            Set<Integer> good,
            Map<String, String> headers,
            @Nullable String upgrade,
            long openNanos) {
        /** What stands for the number of the client, in a path or in the value of a header. */
        public static final String CLIENT = "{client}";

        /** How long a tunnel stays open unless a drill says otherwise: ten seconds. */
        public static final long USUAL_OPEN_NANOS = 10_000_000_000L;

        public Request {
            good = Set.copyOf(good);
            headers = Collections.unmodifiableMap(new LinkedHashMap<>(headers));
            Check.that(path.startsWith("/"), "a path begins with a slash: %s", path);
            Check.share(share, "share");
            Check.notNegative(bodyBytes, "body");
            Check.that(upgrade == null || method.equals("GET"), "an upgrade is asked for with GET, not %s", method);
            Check.that(upgrade == null ? openNanos == 0 : openNanos > 0, "open %d ns", openNanos);
        }

        /** An ordinary request without fields of its own. */
        public Request(String method, String path, double share, int bodyBytes, Set<Integer> good) {
            this(method, path, share, bodyBytes, good, Map.of(), null, 0);
        }
    }
}
