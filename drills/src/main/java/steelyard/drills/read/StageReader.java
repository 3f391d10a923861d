package steelyard.drills.read;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Host;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Stage;

/** Reads {@code stage:}. */
final class StageReader {
    private static final Quantity<Integer> LOOPS = Numbers.from(1, 64);
    private static final Quantity<Integer> CONNECTIONS = Numbers.from(1, 10_000_000);

    private final Problems problems;
    private final @Nullable Path folder;
    private final List<String> poolNames = new ArrayList<>();
    private final UnusedWeights unused;

    StageReader(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.folder = folder;
        this.unused = new UnusedWeights(problems);
    }

    /** The stage; null when it has no pool. */
    @Nullable
    Stage read(Fields drill) {
        if (!drill.has("stage")) {
            drill.missing("stage", "write stage: {pools: ...}");
            return null;
        }
        Fields fields = drill.map("stage", Keys.STAGE);
        HostsReader hosts = new HostsReader(fields);
        PoolReader reader = new PoolReader(
                problems, new BackendsReader(problems, hosts, new ServesReader(problems, folder)), unused, folder);
        List<Pool> pools = new ArrayList<>();
        List<Node.Entry> entries = fields.named("pools", "pool");
        for (Node.Entry entry : entries) {
            poolNames.add(entry.key());
            Pool pool = reader.read(entry);
            if (pool != null) {
                pools.add(pool);
            }
        }
        if (entries.isEmpty()) {
            fields.missing("pools", "write pools: {seats: {method: ..., backends: ...}}");
        }
        List<Host> all = hosts.finish();
        checkHostWeights(hosts, pools);
        return pools.isEmpty()
                ? null
                : new Stage(
                        fields.read("loops", LOOPS, 1),
                        fields.read("connections", CONNECTIONS, Stage.USUAL_CONNECTIONS),
                        all,
                        pools);
    }

    /** The names of all pools in the file, of those too that have no backend. */
    List<String> poolNames() {
        return poolNames;
    }

    /** Weights of pools that play no part, unless a cue brings them into play. */
    UnusedWeights unusedWeights() {
        return unused;
    }

    private void checkHostWeights(HostsReader hosts, List<Pool> pools) {
        Place written = hosts.firstWeight();
        boolean byHost = pools.stream().anyMatch(pool -> pool.weights() == Pool.Weights.HOST);
        if (written != null && !byHost && hosts.weightsDiffer()) {
            problems.notice(
                    written,
                    "host weights play no part, since every pool says weights: backend",
                    "leave them out, or write weights: host");
        }
    }
}
