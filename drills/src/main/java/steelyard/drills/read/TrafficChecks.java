package steelyard.drills.read;

import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Limits;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Traffic;

/** Looks for requests that the pool which they go to cannot take as they are meant. */
final class TrafficChecks {
    private final Problems problems;
    private final @Nullable Stage stage;

    /** With the stage, or null when it could not be read: then nothing can be said. */
    TrafficChecks(Problems problems, @Nullable Stage stage) {
        this.problems = problems;
        this.stage = stage;
    }

    void check(Fields fields, Traffic stream) {
        Pool pool = pool(stream.pool());
        if (pool == null) {
            return;
        }
        List<Node> nodes = fields.node("requests") instanceof Node.Items items ? items.nodes() : List.of();
        for (int i = 0; i < stream.requests().size(); i++) {
            Traffic.Request request = stream.requests().get(i);
            Place place = i < nodes.size() ? nodes.get(i).place() : fields.place();
            refuseAsked(request, pool, fields.has("requests") ? fields.valuePlace("requests") : fields.place());
            refuseUpgrade(request, pool, place);
            noticeSize(request, pool.limits(), place);
            noticeSilence(request, pool, place);
        }
    }

    private @Nullable Pool pool(String name) {
        return stage == null
                ? null
                : stage.pools().stream()
                        .filter(each -> each.name().equals(name))
                        .findFirst()
                        .orElse(null);
    }

    /** A backend knows a probe and a reading by their paths alone, so a request for one would be no traffic. */
    private void refuseAsked(Traffic.Request request, Pool pool, Place place) {
        Probe probe = pool.probe();
        String probed = probe == null ? null : probe.path();
        if (probed != null && Paths.asksFor(request.path(), probed)) {
            problems.add(
                    place,
                    "a backend would take '" + request.path() + "' for a probe of the pool",
                    "ask for another path, or let the probe do so");
        }
        LoadProbe load = pool.health().load();
        if (load != null && Paths.asksFor(request.path(), load.path())) {
            problems.add(
                    place,
                    "a backend would take '" + request.path() + "' for a reading of its load",
                    "ask for another path, or let load do so");
        }
    }

    private void refuseUpgrade(Traffic.Request request, Pool pool, Place place) {
        if (request.upgrade() != null && pool.passesOctets()) {
            problems.add(
                    place,
                    "an upgrade through a tcp front is no upgrade of the balancer's",
                    "send it to a pool with an http front");
        }
    }

    private void noticeSize(Traffic.Request request, Limits limits, Place place) {
        if (request.path().length() > limits.targetBytes()) {
            problems.notice(
                    place,
                    "the pool answers every such request with 414",
                    "raise its limit of target, unless that is meant");
        }
        if (limits.bodyBytes() != Limits.NONE && request.bodyBytes() > limits.bodyBytes()) {
            problems.notice(
                    place,
                    "the pool answers every such request with 413",
                    "raise its limit of body, unless that is meant");
        }
    }

    /** Without mapping files every answer of a backend has status 200. */
    private void noticeSilence(Traffic.Request request, Pool pool, Place place) {
        boolean own =
                pool.backends().stream().allMatch(backend -> backend.serves().answers() == null);
        if (own && !request.good().isEmpty() && !request.good().contains(200)) {
            problems.notice(
                    place,
                    "no answer to '" + request.path() + "' could be good: the backends answer with status 200",
                    "add 200 to good, or give the backends a folder of answers");
        }
    }
}
