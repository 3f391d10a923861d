package steelyard.drills.read;

import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Traffic;

/** Reads {@code traffic:}. */
final class TrafficReader {
    private static final Quantity<Traffic.Arrivals> ARRIVALS = Words.of("a law of arrivals", Traffic.Arrivals.values());
    private static final Quantity<Integer> CLIENTS = Numbers.from(1, 1_000_000);
    private static final Quantity<Double> SKEW =
            Numbers.NUMBER.that(s -> s >= 0 && s <= 10, "is out of range", "write a number from 0 to 10");
    private static final Quantity<String> POOL = Names.name("the name of a pool", "seats");
    private static final List<String> METHODS = List.of("get", "head", "post", "put", "delete", "patch", "options");
    private static final Traffic.Request GET = new Traffic.Request("GET", "/", 1, 0, Set.of());

    private final Problems problems;
    private final List<String> pools;
    private final @Nullable Stage stage;
    private final long lastsNanos;

    /** With the names of the pools, none when they are not known, and the stage, null when it could not be read. */
    TrafficReader(Problems problems, List<String> pools, @Nullable Stage stage, long lastsNanos) {
        this.problems = problems;
        this.pools = pools;
        this.stage = stage;
        this.lastsNanos = lastsNanos;
    }

    List<Traffic> read(Fields drill) {
        if (!drill.has("traffic")) {
            drill.missing("traffic", "write traffic: [{to: seats, rate: 300/s}]");
            return List.of();
        }
        List<Traffic> streams = new ArrayList<>();
        Node node = drill.node("traffic");
        List<Node> nodes = drill.list("traffic");
        for (Node one : nodes) {
            Fields fields = Fields.open(one, Keys.TRAFFIC, problems);
            Traffic stream = stream(fields);
            streams.add(stream);
            noticeSilence(fields, stream);
        }
        if (nodes.isEmpty() && node instanceof Node.Items) {
            problems.add(node.place(), "there is no traffic", "write traffic: [{to: seats, rate: 300/s}]");
        }
        return streams;
    }

    private Traffic stream(Fields fields) {
        String to = to(fields);
        List<Traffic.Request> requests = requests(fields);
        refuseProbePath(fields, to, requests);
        return new Traffic(
                to,
                fields.read("arrivals", ARRIVALS, Traffic.Arrivals.POISSON),
                steps(fields),
                fields.read("clients", CLIENTS, 64),
                fields.read("skew", SKEW, 0.0),
                fields.read("give-up", Durations.POSITIVE, 10 * Durations.SECOND),
                requests);
    }

    /** A backend knows a probe by its path alone, so a request for it would be no traffic. */
    private void refuseProbePath(Fields fields, String to, List<Traffic.Request> requests) {
        String probed = probePath(to);
        for (Traffic.Request request : requests) {
            if (probed != null && asksFor(request.path(), probed)) {
                problems.add(
                        fields.has("requests") ? fields.valuePlace("requests") : fields.place(),
                        "a backend would take '" + request.path() + "' for a probe of the pool",
                        "ask for another path, or let the probe do so");
            }
        }
    }

    /** Without mapping files every answer of a backend has status 200. */
    private void noticeSilence(Fields fields, Traffic stream) {
        boolean own = stage != null
                && stage.pools().stream()
                        .filter(pool -> pool.name().equals(stream.pool()))
                        .flatMap(pool -> pool.backends().stream())
                        .allMatch(backend -> backend.serves().answers() == null);
        for (int i = 0; own && i < stream.requests().size(); i++) {
            Traffic.Request request = stream.requests().get(i);
            if (!request.good().isEmpty() && !request.good().contains(200)) {
                problems.notice(
                        fields.list("requests").get(i).place(),
                        "no answer to '" + request.path() + "' could be good: the backends answer with status 200",
                        "add 200 to good, or give the backends a folder of answers");
            }
        }
    }

    private @Nullable String probePath(String pool) {
        for (Pool each : stage == null ? List.<Pool>of() : stage.pools()) {
            Probe probe = each.probe();
            if (each.name().equals(pool) && probe != null) {
                return probe.path();
            }
        }
        return null;
    }

    /** Whether a target is this path, with whatever query where the path names none. */
    private static boolean asksFor(String target, String path) {
        return target.equals(path) || (path.indexOf('?') < 0 && target.startsWith(path + "?"));
    }

    private String to(Fields fields) {
        String to = fields.need("to", POOL, "");
        if (!pools.isEmpty() && !to.isEmpty() && !pools.contains(to)) {
            problems.add(
                    fields.valuePlace("to"),
                    "there is no pool " + Quantity.quoted(to),
                    NearWord.remedy(to, pools, "the stage has " + Sentence.and(pools)));
        }
        return to;
    }

    private List<Traffic.Step> steps(Fields fields) {
        if (fields.has("rate") && fields.has("steps")) {
            problems.add(fields.keyPlace("steps"), "both rate and steps are given", "keep one of them");
        }
        if (!fields.has("steps")) {
            return List.of(new Traffic.Step(lastsNanos, fields.need("rate", Rates.POSITIVE, 1.0)));
        }
        List<Traffic.Step> steps = new ArrayList<>();
        long begins = 0;
        for (Node node : fields.list("steps")) {
            Fields step = Fields.open(node, Keys.STEP, problems);
            if (begins >= lastsNanos) {
                problems.notice(node.place(), "this step begins when the play is over", "shorten those before it");
            }
            long holds = step.need("for", Durations.POSITIVE, 1L);
            begins = Math.min(begins + holds, Long.MAX_VALUE / 2);
            steps.add(new Traffic.Step(holds, step.need("rate", Rates.RATE, 1.0)));
        }
        if (steps.isEmpty()) {
            problems.add(fields.valuePlace("steps"), "steps: has no step", "write steps: [{for: 20s, rate: 300/s}]");
            steps.add(new Traffic.Step(1, 1));
        } else if (begins < lastsNanos) {
            problems.notice(
                    fields.keyPlace("steps"),
                    "the steps end at " + Durations.text(begins) + ", before the play does: the last rate holds on",
                    "lengthen the last step, or add one");
        }
        return steps;
    }

    private List<Traffic.Request> requests(Fields fields) {
        List<Node> nodes = fields.list("requests");
        if (!fields.has("requests") || nodes.isEmpty()) {
            return List.of(GET);
        }
        List<Traffic.Request> requests = new ArrayList<>();
        double sum = 0;
        boolean known = true;
        for (Node node : nodes) {
            Fields request = Fields.open(node, Keys.REQUEST, problems);
            double whole = nodes.size() == 1 ? 1.0 : 0.0;
            Double share = request.read("share", Shares.SHARE);
            if (!request.has("share") && nodes.size() > 1) {
                request.missing("share", "say which share of the requests it is, such as share: 20%");
            }
            known &= share != null || (whole == 1 && !request.has("share"));
            sum += share == null ? whole : share;
            requests.add(request(request, share == null ? whole : share));
        }
        if (Math.abs(sum - 1) < 1e-9) {
            return requests;
        }
        if (known) {
            problems.add(
                    fields.valuePlace("requests"),
                    "the shares of the requests sum to " + percent(sum) + ", not 100%",
                    "change them so that they do");
        }
        return List.of(GET);
    }

    private Traffic.Request request(Fields fields, double share) {
        List<String> methods = fields.given().stream().filter(METHODS::contains).toList();
        String method = methods.isEmpty() ? "get" : methods.get(0);
        if (methods.size() != 1 && !fields.odd()) {
            problems.add(
                    fields.place(),
                    methods.isEmpty() ? "a request needs a method and a path" : "a request has one method",
                    "write one, such as get: /sailings/today");
        }
        return new Traffic.Request(
                method.toUpperCase(Locale.ROOT),
                fields.read(method, PoolReader.PATH, "/"),
                share,
                fields.read("body", Sizes.SIZE, 0),
                new HashSet<>(fields.values("good", Numbers.STATUS)));
    }

    private static String percent(double share) {
        return BigDecimal.valueOf(share * 100)
                        .setScale(4, RoundingMode.HALF_UP)
                        .stripTrailingZeros()
                        .toPlainString()
                + "%";
    }
}
