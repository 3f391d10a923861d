package steelyard.harness.stage;

import java.nio.file.Path;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.InFlightSettings;
import steelyard.balancer.settings.LimitSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.ReserveSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.TimeoutSettings;
import steelyard.balancer.settings.TlsSettings;
import steelyard.balancer.settings.WarmUpSettings;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Bench;
import steelyard.drills.model.Front;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.Limits;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.WarmUp;
import steelyard.drills.model.Wire;
import steelyard.harness.record.Cast;

/** A pool of a drill in the words of the balancer. */
final class PoolTerms {
    private PoolTerms() {}

    static PoolSettings of(Pool pool, Cast cast) {
        Affinity affinity = pool.picking().affinity();
        return PoolSettings.named(pool.name(), PickTerms.of(pool.picking()))
                .probe(probe(pool.probe()))
                .warmUp(warmUp(pool.warmUp()))
                .drain(new DrainSettings(pool.drain().limitNanos(), pool.drain().keepClients()))
                .retry(retry(pool.retry()))
                .load(pool.weights() == Pool.Weights.LOAD ? load(pool.health().load()) : null)
                .affinity(affinity == null ? null : affinity(affinity))
                .bench(bench(pool.health().bench()))
                .reserve(new ReserveSettings(
                        pool.reserve().lastResort(), pool.reserve().standby()))
                .inFlight(inFlight(pool.inFlight()))
                .timeouts(timeouts(pool.timeouts()))
                .limits(limits(pool.limits()))
                .front(front(pool.wire()))
                .of(pool.backends().stream()
                        .map(each -> new BackendSettings(
                                each.name(),
                                each.weight(),
                                cast.hostNumber(each.host()),
                                each.startsDown(),
                                each.tier()))
                        .toList());
    }

    static @Nullable ProbeSettings probe(@Nullable Probe probe) {
        return probe == null
                ? null
                : new ProbeSettings(
                        probe.path(),
                        probe.everyNanos(),
                        probe.withinNanos(),
                        probe.misses(),
                        probe.passes(),
                        probe.jitter());
    }

    private static @Nullable WarmUpSettings warmUp(@Nullable WarmUp warmUp) {
        return warmUp == null ? null : new WarmUpSettings(warmUp.rampNanos(), warmUp.floor());
    }

    private static @Nullable RetrySettings retry(@Nullable Retry retry) {
        return retry == null ? null : new RetrySettings(retry.atMost(), retry.budget(), retry.bucket(), retry.also());
    }

    /** What a reading costs is the backend's affair. */
    private static @Nullable LoadSettings load(@Nullable LoadProbe load) {
        return load == null
                ? null
                : new LoadSettings(
                        load.path(),
                        load.everyNanos(),
                        load.withinNanos(),
                        load.staleAfterNanos(),
                        load.floor(),
                        load.gauges().stream()
                                .map(each -> new LoadSettings.Gauge(each.name(), each.ceiling(), each.gain()))
                                .toList());
    }

    private static AffinitySettings affinity(Affinity affinity) {
        String cookie = affinity.cookie();
        return switch (affinity.by()) {
            case COOKIE ->
                new AffinitySettings(
                        AffinitySettings.By.COOKIE,
                        cookie == null ? Affinity.USUAL_COOKIE : cookie,
                        affinity.lastsNanos());
            case CLIENT ->
                new AffinitySettings(AffinitySettings.By.CLIENT, Affinity.USUAL_COOKIE, affinity.lastsNanos());
        };
    }

    private static @Nullable BenchSettings bench(@Nullable Bench bench) {
        return bench == null
                ? null
                : new BenchSettings(
                        bench.after(),
                        bench.share(),
                        bench.overNanos(),
                        bench.least(),
                        bench.timeNanos(),
                        bench.mostNanos(),
                        bench.quietNanos(),
                        bench.cap());
    }

    private static @Nullable InFlightSettings inFlight(@Nullable InFlight inFlight) {
        return inFlight == null
                ? null
                : new InFlightSettings(inFlight.most(), inFlight.waiting(), inFlight.waitNanos());
    }

    private static TimeoutSettings timeouts(Timeouts timeouts) {
        return new TimeoutSettings(
                timeouts.connectNanos(),
                timeouts.firstByteNanos(),
                timeouts.idleNanos(),
                timeouts.headNanos(),
                timeouts.bodyNanos());
    }

    private static LimitSettings limits(Limits limits) {
        return new LimitSettings(
                limits.targetBytes(),
                limits.headBytes(),
                limits.bodyBytes() == Limits.NONE ? Long.MAX_VALUE : limits.bodyBytes());
    }

    private static FrontSettings front(Wire wire) {
        Front front = wire.front();
        FrontSettings.Kind kind = switch (front.kind()) {
            case HTTP -> FrontSettings.Kind.HTTP;
            case TCP -> FrontSettings.Kind.TCP;
        };
        FrontSettings.Forwarded forwarded = switch (wire.forwarded()) {
            case ADDED -> FrontSettings.Forwarded.SHOWN;
            case NOT_ADDED -> FrontSettings.Forwarded.NOT;
            case HIDDEN -> FrontSettings.Forwarded.HIDDEN;
        };
        return new FrontSettings(front.port(), kind, tls(front.tls()), wire.backendTls(), forwarded);
    }

    private static @Nullable TlsSettings tls(Front.@Nullable Tls tls) {
        return tls == null
                ? null
                : new TlsSettings(path(tls.certificate()), path(tls.key()), path(tls.store()), tls.passwordFrom());
    }

    private static @Nullable Path path(@Nullable String name) {
        return name == null ? null : Path.of(name);
    }
}
