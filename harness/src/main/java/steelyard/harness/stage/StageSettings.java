package steelyard.harness.stage;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.fleet.BackendSpec;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.TimeoutSettings;
import steelyard.balancer.settings.WarmUpSettings;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.WarmUp;
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
                cast.pools().stream().map(pool -> pool(pool, cast)).toList();
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
        };
    }

    private static PoolSettings pool(Pool pool, Cast cast) {
        return PoolSettings.named(
                        pool.name(),
                        PickSettings.of(method(pool.method()))
                                .with(count(pool.count()))
                                .with(weights(pool.weights())))
                .probe(probe(pool.probe()))
                .warmUp(warmUp(pool.warmUp()))
                .drain(new DrainSettings(pool.drainLimitNanos(), false))
                .retry(retry(pool.retry()))
                .timeouts(timeouts(pool.timeouts()))
                .front(new FrontSettings(
                        pool.frontPort(),
                        FrontSettings.Kind.HTTP,
                        null,
                        false,
                        pool.forwarded() ? FrontSettings.Forwarded.SHOWN : FrontSettings.Forwarded.NOT))
                .of(pool.backends().stream()
                        .map(each -> new BackendSettings(
                                each.name(), each.weight(), cast.hostNumber(each.host()), each.startsDown()))
                        .toList());
    }

    private static PoolSettings.Method method(Pool.Method method) {
        return switch (method) {
            case ROUND_ROBIN -> PoolSettings.Method.ROUND_ROBIN;
            case WEIGHTED_ROUND_ROBIN -> PoolSettings.Method.WEIGHTED_ROUND_ROBIN;
            case STRIDE -> PoolSettings.Method.STRIDE;
            case LEAST_CONNECTIONS -> PoolSettings.Method.LEAST_CONNECTIONS;
        };
    }

    private static PoolSettings.Count count(Pool.Count count) {
        return switch (count) {
            case REQUESTS -> PoolSettings.Count.REQUESTS;
            case CONNECTIONS -> PoolSettings.Count.CONNECTIONS;
        };
    }

    private static PoolSettings.Weights weights(Pool.Weights weights) {
        return switch (weights) {
            case BACKEND -> PoolSettings.Weights.BACKEND;
            case HOST -> PoolSettings.Weights.HOST;
        };
    }

    private static @Nullable ProbeSettings probe(@Nullable Probe probe) {
        return probe == null
                ? null
                : new ProbeSettings(
                        probe.path(), probe.everyNanos(), probe.withinNanos(), probe.misses(), probe.passes());
    }

    private static @Nullable WarmUpSettings warmUp(@Nullable WarmUp warmUp) {
        return warmUp == null ? null : new WarmUpSettings(warmUp.rampNanos(), warmUp.floor());
    }

    private static @Nullable RetrySettings retry(@Nullable Retry retry) {
        return retry == null ? null : new RetrySettings(retry.atMost(), retry.budget(), retry.bucket(), retry.also());
    }

    private static TimeoutSettings timeouts(Timeouts timeouts) {
        return new TimeoutSettings(timeouts.connectNanos(), timeouts.firstByteNanos(), timeouts.idleNanos());
    }
}
