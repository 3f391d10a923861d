package steelyard.harness.stage.virtual;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.RetrySettings;

/**
 * What of a pool's settings is looked up for every request.
 *
 * @param pins whether a client's connection follows one backend
 * @param octets whether connections are passed through as they are
 * @param retries whether failed attempts are asked about at all
 * @param mostRetries of one request
 * @param again by status, whether an answer of it is asked about
 * @param byAddress whether clients are held by their address
 * @param berthNanos how long a client keeps the cookie that holds it to a backend, or 0 for no such cookie
 * @param frontTls whether clients speak TLS
 * @param backendTls whether backends are spoken to over TLS
 */
record PoolRules(
        boolean pins,
        boolean octets,
        boolean retries,
        int mostRetries,
        boolean[] again,
        boolean byAddress,
        long berthNanos,
        boolean frontTls,
        boolean backendTls) {
    private static final int STATUSES = 600;

    static PoolRules of(PoolSettings pool) {
        RetrySettings retry = pool.retry();
        AffinitySettings affinity = pool.affinity();
        boolean octets = pool.front().kind() == FrontSettings.Kind.TCP;
        return new PoolRules(
                pool.count() == PoolSettings.Count.CONNECTIONS,
                octets,
                retry != null,
                retry == null ? 0 : retry.atMost(),
                again(retry),
                affinity != null && affinity.by() == AffinitySettings.By.CLIENT,
                octets ? 0 : berthNanos(affinity),
                pool.front().tls() != null,
                pool.front().backendTls());
    }

    private static long berthNanos(@Nullable AffinitySettings affinity) {
        return affinity == null || affinity.by() != AffinitySettings.By.COOKIE ? 0 : affinity.lastsNanos();
    }

    private static boolean[] again(@Nullable RetrySettings retry) {
        boolean[] again = new boolean[STATUSES];
        if (retry != null) {
            retry.also().forEach(status -> again[status] = true);
        }
        return again;
    }

    /** Whether the core is to be asked about another attempt after an answer. */
    boolean asksAbout(int attempt, int status) {
        return attempt <= mostRetries && again[status];
    }
}
