package steelyard.drills.read;

import java.nio.file.Path;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Drain;
import steelyard.drills.model.Health;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.Limits;
import steelyard.drills.model.Picking;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Reserve;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.Wire;

/** Reads one pool. */
final class PoolReader {
    private final Problems problems;
    private final BackendsReader backends;
    private final PickingReader pickings;
    private final HealthReader healths;
    private final GuardsReader guards;
    private final FrontReader fronts;
    private final UnusedWeights unused;

    /**
     * With what takes weights that play no part, and the folder that names of files begin at, or null to leave them as
     * they are.
     */
    PoolReader(Problems problems, BackendsReader backends, UnusedWeights unused, @Nullable Path folder) {
        this.problems = problems;
        this.backends = backends;
        this.pickings = new PickingReader(problems);
        this.healths = new HealthReader(problems);
        this.guards = new GuardsReader(problems);
        this.fronts = new FrontReader(problems, folder);
        this.unused = unused;
    }

    /** The pool, or null when it has no backend or its parts do not go together. */
    @Nullable
    Pool read(Node.Entry entry) {
        Fields fields = Fields.open(entry.value(), Keys.POOL, problems);
        Picking picking = pickings.read(fields);
        Health health = healths.read(fields);
        Reserve reserve = guards.reserve(fields);
        InFlight inFlight = guards.inFlight(fields);
        Drain drain = guards.drain(fields);
        Retry retry = guards.retry(fields);
        Timeouts timeouts = guards.timeouts(fields);
        Limits limits = guards.limits(fields);
        Wire wire = fronts.read(fields, entry.key());
        BackendsReader.OfPool ofPool = backends.read(fields, entry.key());
        PoolChecks checks = new PoolChecks(problems, fields, ofPool);
        checks.weights(entry.key(), picking, unused);
        checks.hash(picking);
        checks.probes(health.probe());
        checks.bench(health.bench());
        checks.readings(picking, health);
        boolean standsBy = checks.tiers(reserve);
        boolean passes = checks.front(picking, retry, wire);
        List<Backend> list = ofPool.backends();
        boolean weighsByNothing = picking.weights() == Pool.Weights.LOAD && health.load() == null;
        return list.isEmpty() || !standsBy || !passes || weighsByNothing
                ? null
                : Pool.with(entry.key(), picking)
                        .health(health)
                        .reserve(reserve)
                        .inFlight(inFlight)
                        .drain(drain)
                        .retry(retry)
                        .timeouts(timeouts)
                        .limits(limits)
                        .wire(wire)
                        .of(list);
    }
}
