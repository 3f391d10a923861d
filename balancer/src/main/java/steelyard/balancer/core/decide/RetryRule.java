package steelyard.balancer.core.decide;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.RetrySettings;

/**
 * Which failed attempts may be made again, and how often.
 *
 * <p>May be: one that was refused; one reset before any byte of the answer, when the method is idempotent or nothing of
 * the request had been written (RFC 9110, 9.2.2); an answer whose status the pool lists, when the method is idempotent.
 * Never: anything after a byte of the answer was passed on, a request whose body can no longer be sent again, a timeout.
 *
 * <p>The budget is a bucket, counted in millionths: full at the start, each first try adds the budget share, each retry
 * takes one, and gives it back when nobody could be found for it.
 */
final class RetryRule {
    private static final long ONE = 1_000_000;

    private final @Nullable RetrySettings settings;
    private final long full;
    private final long perTry;
    private long bucket;

    RetryRule(@Nullable RetrySettings settings) {
        this.settings = settings;
        full = settings == null ? 0 : settings.bucket() * ONE;
        perTry = settings == null ? 0 : Math.round(settings.budget() * ONE);
        bucket = full;
    }

    boolean asked() {
        return settings != null;
    }

    void firstTry() {
        bucket = Math.min(full, bucket + perTry);
    }

    /** Whether to try again; takes one from the bucket when it says yes. */
    boolean grants(int attempt, Outcome outcome, int status, boolean idempotent, boolean headSent, boolean replayable) {
        if (settings == null
                || attempt > settings.atMost()
                || !replayable
                || !repeatable(settings, outcome, status, idempotent, headSent)
                || bucket < ONE) {
            return false;
        }
        bucket -= ONE;
        return true;
    }

    /** A granted retry was not made after all. */
    void giveBack() {
        bucket = Math.min(full, bucket + ONE);
    }

    private static boolean repeatable(
            RetrySettings settings, Outcome outcome, int status, boolean idempotent, boolean headSent) {
        return switch (outcome) {
            case REFUSED -> true;
            case RESET -> idempotent || !headSent;
            case ANSWERED -> idempotent && settings.also().contains(status);
            case BROKEN, MALFORMED, LATE, STALLED, CUT, ABANDONED -> false;
        };
    }
}
