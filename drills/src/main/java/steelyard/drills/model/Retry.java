package steelyard.drills.model;

import java.util.Set;

/**
 * Whether a failed attempt may be made again on another backend.
 *
 * @param atMost retries a request, at least 1
 * @param budget what each first try adds to the bucket, a share from 0 to 1
 * @param bucket how many retries the bucket holds at most, at least 1; it is full at the start
 * @param also statuses of a backend that are retried too, for idempotent methods
 */
public record Retry(int atMost, double budget, int bucket, Set<Integer> also) {
    public Retry {
        also = Set.copyOf(also);
        Check.positive(atMost, "at-most");
        Check.share(budget, "budget");
        Check.positive(bucket, "bucket");
    }
}
