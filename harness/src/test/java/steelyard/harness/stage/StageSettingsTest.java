package steelyard.harness.stage;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.List;
import java.util.Set;
import org.junit.jupiter.api.Test;
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
import steelyard.drills.model.Drain;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Health;
import steelyard.drills.model.Host;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Timeouts;
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
