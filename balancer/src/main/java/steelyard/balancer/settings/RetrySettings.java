package steelyard.balancer.settings;

import java.util.Set;

/**
 * When a failed attempt is made again on another backend.
 *
 * @param atMost retries a request, at least 1
 * @param budget what each first try adds to the bucket, from 0 to 1
 * @param bucket retries that the bucket holds at most, at least 1; full at the start
 * @param also statuses of a backend that are retried too where the method is idempotent
 */
public record RetrySettings(int atMost, double budget, int bucket, Set<Integer> also) {
    public RetrySettings {
        also = Set.copyOf(also);
        Check.that(atMost >= 1, "at most %d retries", atMost);
        Check.that(budget >= 0 && budget <= 1, "budget %s", budget);
        Check.that(bucket >= 1, "bucket %d", bucket);
    }
}
