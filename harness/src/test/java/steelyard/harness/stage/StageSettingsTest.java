package steelyard.harness.stage;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.List;
import java.util.Set;
import org.junit.jupiter.api.Test;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.Cold;
import steelyard.backends.behave.Gauge;
import steelyard.backends.behave.LoadPage;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.fleet.BackendSpec;
import steelyard.balancer.settings.AffinitySettings;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.BenchSettings;
import steelyard.balancer.settings.DelaySettings;
import steelyard.balancer.settings.DrainSettings;
import steelyard.balancer.settings.FrontSettings;
import steelyard.balancer.settings.HashSettings;
import steelyard.balancer.settings.HostSettings;
import steelyard.balancer.settings.InFlightSettings;
import steelyard.balancer.settings.LimitSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PickSettings;
import steelyard.balancer.settings.PoolSettings;
import steelyard.balancer.settings.ProbeSettings;
import steelyard.balancer.settings.ReserveSettings;
import steelyard.balancer.settings.RetrySettings;
import steelyard.balancer.settings.TimeoutSettings;
import steelyard.balancer.settings.TlsSettings;
import steelyard.balancer.settings.WarmUpSettings;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Bench;
import steelyard.drills.model.Drain;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.Health;
import steelyard.drills.model.Host;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.Limits;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Reserve;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.Trace;
import steelyard.drills.model.Traffic;
import steelyard.drills.model.WarmUp;
import steelyard.drills.model.Wire;

class StageSettingsTest {
    private static final Drill DRILL = drill();

    @Test
    void balancer_takesEveryWordOfAPool() {
        assertThat(StageSettings.balancer(DRILL))
                .isEqualTo(new BalancerSettings(
                        "steelyard",
                        2,
                        List.of(new HostSettings("quay", 3), new HostSettings("pier", 4)),
                        List.of(
                                PoolSettings.named(
                                                "seats",
                                                PickSettings.of(PoolSettings.Method.WEIGHTED_ROUND_ROBIN)
                                                        .with(PoolSettings.Count.CONNECTIONS)
                                                        .with(PoolSettings.Weights.HOST))
                                        .probe(new ProbeSettings("/afloat", 11, 12, 13, 14))
                                        .warmUp(new WarmUpSettings(21, 0.2))
                                        .drain(new DrainSettings(31, false))
                                        .retry(new RetrySettings(2, 0.4, 9, Set.of(503)))
                                        .timeouts(new TimeoutSettings(41, 42, 43))
                                        .front(new FrontSettings(
                                                20_080,
                                                FrontSettings.Kind.HTTP,
                                                null,
                                                false,
                                                FrontSettings.Forwarded.SHOWN))
                                        .of(List.of(new BackendSettings("fulmar", 5, 1, true))),
                                PoolSettings.named("cargo", PickSettings.of(PoolSettings.Method.LEAST_CONNECTIONS))
                                        .drain(new DrainSettings(32, false))
                                        .timeouts(new TimeoutSettings(44, 45, 46))
                                        .of(List.of(
                                                new BackendSettings("skua", 1, 0, false),
                                                new BackendSettings("tern", 2, 0, false))))));
    }

    @Test
    void balancer_takesEveryWordOfACompletePool() {
        Serves serves = plain(Serves.Time.fixed(8));
        Pool pool = Pool.with(
                        "berths",
                        new Picking(
                                Pool.Method.HASH,
                                Pool.Count.REQUESTS,
                                Pool.Weights.LOAD,
                                new Hashing(Hashing.By.COOKIE, "berth", Hashing.Table.PERMUTATION, 7, 101, 1.25),
                                null,
                                new Affinity(Affinity.By.COOKIE, "held", 51)))
                .health(new Health(
                        new Probe(Probe.Kind.TCP, null, 11, 12, 13, 14, 0.1),
                        null,
                        new Bench(1, 0.2, 3, 4, 5, 6, 7, 0.8),
                        new LoadProbe("/gauges", 61, 62, 63, 0.64, 65, List.of(new LoadProbe.Gauge("cpu", 0.8, 2)))))
                .reserve(new Reserve(0.3, 0.4))
                .inFlight(new InFlight(71, 72, 73))
                .drain(new Drain(31, true))
                .timeouts(new Timeouts(41, 42, 43, 44, 45))
                .limits(new Limits(81, 82, 83))
                .wire(new Wire(
                        new Front(1, Front.Kind.HTTP, Front.Tls.store("front.p12", "PASS")), Forwarded.HIDDEN, true))
                .of(List.of(
                        new Backend("skua", "skua", 1, "quay", false, 1, serves),
                        new Backend("tern", "tern", 2, "quay", false, 2, serves)));
        assertThat(StageSettings.balancer(drill(pool)).pools())
                .containsExactly(PoolSettings.named(
                                "berths",
                                new PickSettings(
                                        PoolSettings.Method.HASH,
                                        PoolSettings.Count.REQUESTS,
                                        PoolSettings.Weights.LOAD,
                                        new HashSettings(
                                                HashSettings.By.COOKIE,
                                                "berth",
                                                HashSettings.Table.PERMUTATION,
                                                7,
                                                101,
                                                1.25),
                                        DelaySettings.USUAL))
                        .probe(new ProbeSettings(null, 11, 12, 13, 14, 0.1))
                        .affinity(new AffinitySettings(AffinitySettings.By.COOKIE, "held", 51))
                        .bench(new BenchSettings(1, 0.2, 3, 4, 5, 6, 7, 0.8))
                        .load(new LoadSettings(
                                "/gauges", 61, 62, 63, 0.64, List.of(new LoadSettings.Gauge("cpu", 0.8, 2))))
                        .reserve(new ReserveSettings(0.3, 0.4))
                        .inFlight(new InFlightSettings(71, 72, 73))
                        .drain(new DrainSettings(31, true))
                        .timeouts(new TimeoutSettings(41, 42, 43, 44, 45))
                        .limits(new LimitSettings(81, 82, 83))
                        .front(new FrontSettings(
                                1,
                                FrontSettings.Kind.HTTP,
                                new TlsSettings(null, null, Path.of("front.p12"), "PASS"),
                                true,
                                FrontSettings.Forwarded.HIDDEN))
                        .of(List.of(
                                new BackendSettings("skua", 1, 0, false, 1),
                                new BackendSettings("tern", 2, 0, false, 2))));
    }

    @Test
    void balancer_ofEachMethod_hasTheMethodOfThatName() {
        for (Pool.Method method : Pool.Method.values()) {
            Pool pool = Pool.with("seats", Picking.by(method))
                    .of(List.of(new Backend("skua", "skua", 1, "quay", false, plain(Serves.Time.fixed(8)))));
            assertThat(StageSettings.balancer(drill(pool))
                            .pools()
                            .get(0)
                            .method()
                            .name())
                    .isEqualTo(method.name());
        }
    }

    @Test
    void backends_withLoadReadings_showAPageAndWhatItCosts() {
        Trace trace = new Trace("times.csv", null, Trace.Order.REPLAYED, Trace.Nanos.of(5, 6));
        Serves serves = new Serves(
                1,
                0,
                Serves.Time.trace(trace),
                0,
                false,
                0,
                null,
                new Serves.Cold(3, 4),
                List.of(new Serves.Gauge("memory", 0.3, 0.005)));
        Pool pool = Pool.with("berths", Picking.by(Pool.Method.STRIDE).with(Pool.Weights.LOAD))
                .health(Health.NONE.with(LoadProbe.USUAL))
                .wire(new Wire(Front.USUAL, Forwarded.NOT_ADDED, true))
                .of(List.of(new Backend("skua", "skua", 1, "quay", false, serves)));
        BackendSpec spec = StageSettings.backends(drill(pool)).get(0);
        assertThat(spec.loadPath()).isEqualTo("/load");
        assertThat(spec.tls()).isTrue();
        assertThat(spec.behaviour().load()).isEqualTo(new LoadPage(0, List.of(new Gauge("memory", 0.3, 0.005))));
        assertThat(spec.behaviour().cold()).isEqualTo(new Cold(3, 4));
        assertThat(spec.behaviour().time()).isInstanceOfSatisfying(ServiceTime.Trace.class, time -> {
            assertThat(time.nanos()).containsExactly(5, 6);
            assertThat(time.order()).isEqualTo(ServiceTime.Order.REPLAYED);
        });
    }

    @Test
    void backends_thatServeByOneTrace_shareIt() {
        Trace trace = new Trace("times.csv", null, Trace.Order.SAMPLED, Trace.Nanos.of(5, 6));
        Serves serves = new Serves(1, 0, Serves.Time.trace(trace), 0, false, 0, null);
        Pool pool = Pool.with("berths", Picking.by(Pool.Method.STRIDE))
                .of(List.of(
                        new Backend("skua", "quay", 1, "quay", false, serves),
                        new Backend("tern", "quay", 1, "quay", false, serves)));
        List<BackendSpec> specs = StageSettings.backends(drill(pool));
        assertThat(specs.get(0).behaviour().time())
                .isSameAs(specs.get(1).behaviour().time());
    }

    private static Drill drill(Pool pool) {
        Traffic traffic = new Traffic(
                pool.name(),
                Traffic.Arrivals.EVEN,
                List.of(new Traffic.Step(1, 1)),
                1,
                0,
                1,
                List.of(new Traffic.Request("GET", "/", 1, 0, Set.of())));
        Stage stage = new Stage(1, 99, List.of(new Host("quay", 1, null)), List.of(pool));
        return new Drill("drill", "about", stage, List.of(traffic), 1, List.of(), List.of());
    }

    @Test
    void backends_takeTheirServiceAndTheProbePathOfTheirPool() {
        assertThat(StageSettings.backends(DRILL))
                .containsExactly(
                        new BackendSpec(
                                "fulmar",
                                new BehaviourSettings(
                                        6, 7, new ServiceTime.Lognormal(8, 9), ProbeWork.QUEUED, 0.25, 200, 10),
                                "/afloat",
                                Path.of("answers")),
                        new BackendSpec(
                                "skua",
                                new BehaviourSettings(1, 0, new ServiceTime.Fixed(8), ProbeWork.FREE, 0, 200, 0),
                                null,
                                null),
                        new BackendSpec(
                                "tern",
                                new BehaviourSettings(1, 0, new ServiceTime.Exponential(8), ProbeWork.FREE, 0, 200, 0),
                                null,
                                null));
    }

    private static Drill drill() {
        Pool seats = Pool.with(
                        "seats",
                        Picking.by(Pool.Method.WEIGHTED_ROUND_ROBIN)
                                .with(Pool.Count.CONNECTIONS)
                                .with(Pool.Weights.HOST))
                .health(Health.NONE
                        .with(new Probe(Probe.Kind.HTTP, "/afloat", 11, 12, 13, 14))
                        .with(new WarmUp(21, 0.2)))
                .drain(new Drain(31, false))
                .retry(new Retry(2, 0.4, 9, Set.of(503)))
                .timeouts(new Timeouts(41, 42, 43))
                .wire(new Wire(new Front(20_080, Front.Kind.HTTP, null), Forwarded.ADDED, false))
                .of(List.of(new Backend(
                        "fulmar",
                        "fulmar",
                        5,
                        "pier",
                        true,
                        new Serves(6, 7, Serves.Time.lognormal(8, 9), 10, true, 0.25, "answers"))));
        Pool cargo = Pool.with("cargo", Picking.by(Pool.Method.LEAST_CONNECTIONS))
                .drain(new Drain(32, false))
                .timeouts(new Timeouts(44, 45, 46))
                .of(List.of(
                        new Backend("skua", "skua", 1, "quay", false, plain(Serves.Time.fixed(8))),
                        new Backend("tern", "tern", 2, "quay", false, plain(Serves.Time.exponential(8)))));
        Stage stage = new Stage(
                2, 99, List.of(new Host("quay", 3, "north"), new Host("pier", 4, null)), List.of(seats, cargo));
        Traffic traffic = new Traffic(
                "seats",
                Traffic.Arrivals.EVEN,
                List.of(new Traffic.Step(1, 1)),
                1,
                0,
                1,
                List.of(new Traffic.Request("GET", "/", 1, 0, Set.of())));
        return new Drill("drill", "about", stage, List.of(traffic), 1, List.of(), List.of());
    }

    private static Serves plain(Serves.Time time) {
        return new Serves(1, 0, time, 0, false, 0, null);
    }
}
