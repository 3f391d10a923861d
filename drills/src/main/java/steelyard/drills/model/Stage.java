package steelyard.drills.model;

import java.util.List;
import java.util.NoSuchElementException;
import java.util.Optional;

/**
 * What a drill is played on.
 *
 * @param loops event loops of the balancer, at least 1
 * @param connections most that clients may have open at once, all together, at least 1
 * @param hosts every host, in list order; a backend that names none stands on a host of its own name
 * @param pools at least one, in list order
 */
public record Stage(int loops, int connections, List<Host> hosts, List<Pool> pools) {
    /** The most connections of clients unless a drill says otherwise. */
    public static final int USUAL_CONNECTIONS = 4_096;

    public Stage {
        hosts = List.copyOf(hosts);
        pools = List.copyOf(pools);
        Check.positive(loops, "loops");
        Check.positive(connections, "connections");
        Check.that(!pools.isEmpty(), "a stage needs a pool");
    }

    /** All backends of all pools, in list order; a backend's place here is its number on the stage. */
    public List<Backend> backends() {
        return pools.stream().flatMap(pool -> pool.backends().stream()).toList();
    }

    /** The pool of that name. Throws {@link NoSuchElementException} when there is none. */
    public Pool pool(String name) {
        return pools.stream()
                .filter(pool -> pool.name().equals(name))
                .findFirst()
                .orElseThrow();
    }

    /** The pool that carries a backend. Throws {@link NoSuchElementException} when there is no such backend. */
    public Pool poolOf(String backend) {
        return pools.stream()
                .filter(pool -> pool.backends().stream().anyMatch(b -> b.name().equals(backend)))
                .findFirst()
                .orElseThrow();
    }

    /** The host of that name, if there is one. */
    public Optional<Host> host(String name) {
        return hosts.stream().filter(host -> host.name().equals(name)).findFirst();
    }
}
