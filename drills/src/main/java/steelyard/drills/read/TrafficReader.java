package steelyard.drills.read;

import java.math.BigDecimal;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Traffic;

/** Reads {@code traffic:}. */
final class TrafficReader {
    private static final Quantity<Traffic.Arrivals> ARRIVALS = Words.of("a law of arrivals", Traffic.Arrivals.values());
    private static final Quantity<Integer> CLIENTS = Numbers.from(1, 1_000_000);
    private static final Quantity<Double> SKEW =
            Numbers.NUMBER.that(s -> s >= 0 && s <= 10, "is out of range", "write a number from 0 to 10");
    private static final Quantity<String> POOL = Names.name("the name of a pool", "seats");
    private static final Traffic.Request GET = new Traffic.Request("GET", "/", 1, 0, Set.of());

    private final Problems problems;
    private final List<String> pools;
    private final RequestReader reader;
    private final TrafficChecks checks;
    private final long lastsNanos;

    /** With the names of the pools, none when they are not known, and the stage, null when it could not be read. */
    TrafficReader(Problems problems, List<String> pools, @Nullable Stage stage, long lastsNanos) {
        this.problems = problems;
        this.pools = pools;
        this.reader = new RequestReader(problems);
        this.checks = new TrafficChecks(problems, stage);
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
            checks.check(fields, stream);
        }
        if (nodes.isEmpty() && node instanceof Node.Items) {
            problems.add(node.place(), "there is no traffic", "write traffic: [{to: seats, rate: 300/s}]");
        }
        return streams;
    }

    private Traffic stream(Fields fields) {
        String to = to(fields);
        List<Traffic.Request> requests = requests(fields);
        return new Traffic(
                to,
                fields.read("arrivals", ARRIVALS, Traffic.Arrivals.POISSON),
                steps(fields),
                fields.read("clients", CLIENTS, 64),
                fields.read("skew", SKEW, 0.0),
                fields.read("give-up", Durations.POSITIVE, 10 * Durations.SECOND),
                requests);
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
            requests.add(reader.read(request, share == null ? whole : share));
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

    private static String percent(double share) {
        return BigDecimal.valueOf(share * 100)
                        .setScale(4, RoundingMode.HALF_UP)
                        .stripTrailingZeros()
                        .toPlainString()
                + "%";
    }
}
