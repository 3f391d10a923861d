package steelyard.harness.stage.virtual;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.RetrySettings;

/**
 * What of a pool's settings is looked up for every request.
 *
 * @param pins whether a client's connection follows one backend
 * @param retries whether failed attempts are asked about at all
 * @param mostRetries of one request
 * @param again by status, whether an answer of it is asked about
 */
record PoolRules(boolean pins, boolean retries, int mostRetries, boolean[] again) {
    private static final int STATUSES = 600;

    static PoolRules of(PoolSettings pool) {
        boolean[] again = new boolean[STATUSES];
        RetrySettings retry = pool.retry();
        if (retry != null) {
            retry.also().forEach(status -> again[status] = true);
        }
        return new PoolRules(pool.count() == PoolSettings.Count.CONNECTIONS, retry != null, most(retry), again);
    }

    /** Whether the core is to be asked about another attempt after an answer. */
    boolean asksAbout(int attempt, int status) {
        return attempt <= mostRetries && again[status];
    }

    private static int most(@Nullable RetrySettings retry) {
        return retry == null ? 0 : retry.atMost();
    }
}
