package steelyard.harness.stage;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.fleet.BackendSpec;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Serves;
import steelyard.harness.record.Cast;

/** A drill's stage in the words of the balancer and of the backends. Numbers are those of the {@link Cast}. */
public final class StageSettings {
    private static final int OK = 200;

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

    /** The backends to start, by number. */
    public static List<BackendSpec> backends(Drill drill) {
        List<BackendSpec> specs = new ArrayList<>();
        for (Pool pool : drill.stage().pools()) {
            for (Backend backend : pool.backends()) {
                specs.add(spec(pool, backend));
            }
        }
        return specs;
    }

    private static BackendSpec spec(Pool pool, Backend backend) {
        Serves serves = backend.serves();
        BehaviourSettings behaviour = new BehaviourSettings(
                serves.workers(),
                serves.queue(),
                time(serves.time()),
                serves.probesQueue() ? ProbeWork.QUEUED : ProbeWork.FREE,
                serves.probeLoss(),
                OK,
                serves.bodyBytes());
        Probe probe = pool.probe();
        String answers = serves.answers();
        return new BackendSpec(
                backend.name(),
                behaviour,
                probe == null ? null : probe.path(),
                answers == null ? null : Path.of(answers));
    }

    private static ServiceTime time(Serves.Time time) {
        return switch (time.law()) {
            case FIXED -> new ServiceTime.Fixed(time.firstNanos());
            case EXPONENTIAL -> new ServiceTime.Exponential(time.firstNanos());
            case LOGNORMAL -> new ServiceTime.Lognormal(time.firstNanos(), time.p99Nanos());
            case GAMMA, TRACE ->
                throw new IllegalArgumentException(
                        "no backend serves by " + time.law().word());
        };
    }
}
