package steelyard.harness.record;

import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Host;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Pool.Weights;
import steelyard.drills.model.Target;

/** Who is on the stage, by number: pools, hosts and backends in list order, backends pool after pool. */
public final class Cast {
    private final List<Pool> pools;
    private final List<Host> hosts;
    private final List<Backend> backends;
    private final Map<String, Integer> backendNumbers = new HashMap<>();
    private final int[] poolOf;
    private final int[] poolsOfTraffic;
    private final int[] hostOf;

    public Cast(Drill drill) {
        pools = drill.stage().pools();
        hosts = drill.stage().hosts();
        backends = drill.stage().backends();
        poolOf = new int[backends.size()];
        hostOf = new int[backends.size()];
        poolsOfTraffic = drill.traffic().stream()
                .mapToInt(each -> poolNumber(each.pool()))
                .toArray();
        int backend = 0;
        for (int pool = 0; pool < pools.size(); pool++) {
            for (Backend each : pools.get(pool).backends()) {
                poolOf[backend] = pool;
                hostOf[backend] = hostNumber(each.host());
                backendNumbers.put(each.name(), backend);
                backend++;
            }
        }
    }

    public List<Pool> pools() {
        return pools;
    }

    public List<Host> hosts() {
        return hosts;
    }

    public List<Backend> backends() {
        return backends;
    }

    /** The number of the pool that carries a backend. */
    public int poolOf(int backend) {
        return poolOf[backend];
    }

    /** By traffic stream: the number of the pool that it goes to. */
    public int[] poolsOfTraffic() {
        return poolsOfTraffic.clone();
    }

    /** Backends of pools whose weights go by load, in stage order. */
    public int[] loaded() {
        return IntStream.range(0, backends.size())
                .filter(backend -> weighsByLoad(poolOf[backend]))
                .toArray();
    }

    /** Whether the weights of a pool go by what its load probes read. */
    public boolean weighsByLoad(int pool) {
        return pools.get(pool).weights() == Weights.LOAD;
    }

    /** Whether what is picked for in a pool are connections, whose octets are passed on as they come. */
    public boolean passesOctets(int pool) {
        return pools.get(pool).passesOctets();
    }

    /** From one load probe of a pool's backends to the next; 0 where nothing reads their load. */
    public long loadPeriodNanos(int pool) {
        LoadProbe load = pools.get(pool).health().load();
        return load == null ? 0 : load.everyNanos();
    }

    /** Whether requests of a pool may wait in the balancer for a backend to be free. */
    public boolean letsWait(int pool) {
        InFlight inFlight = pools.get(pool).inFlight();
        return inFlight != null && inFlight.waiting() > 0;
    }

    /** The number of the host that a backend stands on. */
    public int hostOf(int backend) {
        return hostOf[backend];
    }

    /** The number of a pool. Throws {@link IllegalArgumentException} for an unknown name. */
    public int poolNumber(String name) {
        for (int pool = 0; pool < pools.size(); pool++) {
            if (pools.get(pool).name().equals(name)) {
                return pool;
            }
        }
        throw new IllegalArgumentException("no pool " + name);
    }

    /** The number of a host. Throws {@link IllegalArgumentException} for an unknown name. */
    public int hostNumber(String name) {
        for (int host = 0; host < hosts.size(); host++) {
            if (hosts.get(host).name().equals(name)) {
                return host;
            }
        }
        throw new IllegalArgumentException("no host " + name);
    }

    /** The number of a backend. Throws {@link IllegalArgumentException} for an unknown name. */
    public int backendNumber(String name) {
        Integer backend = backendNumbers.get(name);
        if (backend == null) {
            throw new IllegalArgumentException("no backend " + name);
        }
        return backend;
    }

    /** The numbers of a target's backends, in stage order. */
    public int[] numbers(Target target) {
        return target.backends().stream().mapToInt(this::backendNumber).toArray();
    }
}
