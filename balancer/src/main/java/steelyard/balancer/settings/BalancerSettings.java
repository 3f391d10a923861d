package steelyard.balancer.settings;

import java.util.List;

/**
 * One balancer instance: its hosts and its pools.
 *
 * <p>Hosts, pools and backends are known by number from here on: hosts and pools by their place in these lists,
 * backends by their place in {@link #backends()}, that is pool after pool in list order.
 *
 * @param name the pseudonym that Via and Proxy-Status carry; letters, digits and hyphens
 * @param loops event loops of the live side, at least 1
 */
public record BalancerSettings(String name, int loops, List<HostSettings> hosts, List<PoolSettings> pools) {
    public BalancerSettings {
        hosts = List.copyOf(hosts);
        pools = List.copyOf(pools);
        Check.that(name.matches("[A-Za-z0-9-]+"), "a balancer's name has letters, digits and hyphens: %s", name);
        Check.that(loops >= 1, "loops: %d", loops);
        Check.that(!pools.isEmpty(), "a balancer needs a pool");
        for (PoolSettings pool : pools) {
            for (BackendSettings backend : pool.backends()) {
                Check.that(backend.host() < hosts.size(), "backend %s stands on no host", backend.name());
            }
        }
    }

    /** The number of a pool's first backend. */
    public int firstBackend(int pool) {
        return pools.subList(0, pool).stream()
                .mapToInt(before -> before.backends().size())
                .sum();
    }

    /** Every backend, by number. */
    public List<BackendSettings> backends() {
        return pools.stream().flatMap(pool -> pool.backends().stream()).toList();
    }
}
