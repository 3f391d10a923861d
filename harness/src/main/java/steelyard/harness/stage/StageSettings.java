package steelyard.harness.stage;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.IdentityHashMap;
import java.util.List;
import java.util.Map;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.fleet.BackendSpec;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drill;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Serves;
import steelyard.harness.record.Cast;

/** A drill's stage in the words of the balancer and of the backends. Numbers are those of the {@link Cast}. */
public final class StageSettings {
    private StageSettings() {}

    /** Settings of the one balancer instance of a play. */
    public static BalancerSettings balancer(Drill drill) {
        Cast cast = new Cast(drill);
        List<HostSettings> hosts = cast.hosts().stream()
                .map(host -> new HostSettings(host.name(), host.weight()))
                .toList();
        List<PoolSettings> pools =
                cast.pools().stream().map(pool -> PoolTerms.of(pool, cast)).toList();
        return new BalancerSettings("steelyard", drill.stage().loops(), hosts, pools);
    }

    /** The backends to start, by number. Those that serve by one trace share it: it may be long. */
    public static List<BackendSpec> backends(Drill drill) {
        List<BackendSpec> specs = new ArrayList<>();
        Map<Serves.Time, ServiceTime> times = new IdentityHashMap<>();
        for (Pool pool : drill.stage().pools()) {
            for (Backend backend : pool.backends()) {
                ServiceTime time = times.computeIfAbsent(backend.serves().time(), ServiceTerms::time);
                specs.add(spec(pool, backend, time));
            }
        }
        return specs;
    }

    private static BackendSpec spec(Pool pool, Backend backend, ServiceTime time) {
        Serves serves = backend.serves();
        Probe probe = pool.probe();
        LoadProbe load = pool.health().load();
        String answers = serves.answers();
        return new BackendSpec(
                backend.name(),
                ServiceTerms.of(serves, time, load),
                probe == null ? null : probe.path(),
                load == null ? null : load.path(),
                answers == null ? null : Path.of(answers),
                pool.wire().backendTls());
    }
}
