package steelyard.drills.model;

import java.util.List;
import java.util.Set;

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
     * @param path origin form, begins with a slash
     * @param share of the requests, from 0 to 1
     * @param bodyBytes size of the request body
     * @param good statuses that count as good; empty for any below 500
     */
    public record Request(String method, String path, double share, int bodyBytes, Set<Integer> good) {
        public Request {
            good = Set.copyOf(good);
            Check.that(path.startsWith("/"), "a path begins with a slash: %s", path);
            Check.share(share, "share");
            Check.notNegative(bodyBytes, "body");
        }
    }
}
