package steelyard.harness.record;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.ObjectWriter;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Expectation.Bound;
import steelyard.drills.model.Host;
import steelyard.drills.model.Measure.Unit;
import steelyard.drills.model.Pool;

/** The JSON files of a run as text: keys in a fixed order, no wall time outside {@code machine.json}. */
public final class RunJson {
    static final int FORMAT = 1;
    static final String HAND_CUES = "handCues";

    private static final ObjectMapper JSON = new ObjectMapper();
    private static final ObjectWriter PRETTY = JSON.writer(new Indent());

    private RunJson() {}

    /** {@code run.json}; without a verdict while the play goes on. */
    static String run(RunHead head, Cast cast, String ended, @Nullable Verdict verdict) {
        ObjectNode run = head(head, cast, ended);
        if (verdict == null) {
            run.putNull("verdict");
        } else {
            putVerdict(run, verdict.met(), verdict.fit(), verdict.text());
            run.put(HAND_CUES, verdict.handCues());
        }
        putFindings(run.putArray("expectations"), verdict == null ? List.of() : verdict.expectations());
        putFindings(run.putArray("measures"), verdict == null ? List.of() : verdict.measures());
        putChecks(run, verdict == null ? List.of() : verdict.checks());
        run.put("source", head.source());
        return text(run);
    }

    /** The first part of {@code run.json}, up to the cast. */
    public static ObjectNode head(RunHead head, Cast cast, String ended) {
        ObjectNode run = JSON.createObjectNode();
        run.put("format", FORMAT);
        run.put("drill", head.drill().name());
        run.put("about", head.drill().about());
        run.put("stage", head.stage());
        run.put("backends", head.backends());
        run.put("seed", head.seed());
        run.put("lasts", head.drill().lastsNanos() / 1e9);
        run.put("ended", ended);
        run.putObject("versions").put("steelyard", head.version());
        putCast(run.putObject("cast"), cast);
        return run;
    }

    /** Adds {@code verdict}. */
    public static void putVerdict(ObjectNode run, boolean met, boolean fit, String text) {
        run.putObject("verdict").put("met", met).put("fit", fit).put("text", text);
    }

    /** Adds {@code checks}. */
    public static void putChecks(ObjectNode run, List<SelfCheck> checks) {
        ArrayNode array = run.putArray("checks");
        for (SelfCheck check : checks) {
            array.addObject().put("check", check.check()).put("ok", check.ok()).put("text", check.text());
        }
    }

    /** {@code verdict.json}. */
    static String verdict(RunHead head, Verdict verdict) {
        ObjectNode node = JSON.createObjectNode();
        node.put("drill", head.drill().name());
        node.put("stage", head.stage());
        node.put("met", verdict.met());
        node.put("fit", verdict.fit());
        node.put("exit", verdict.exit());
        node.put("text", verdict.text());
        node.put(HAND_CUES, verdict.handCues());
        ArrayNode expectations = node.putArray("expectations");
        for (Finding finding : verdict.expectations()) {
            ObjectNode each = expectations
                    .addObject()
                    .put("measure", finding.measure().word())
                    .put("of", finding.of())
                    .put("text", finding.text())
                    .put("bound", finding.boundText())
                    .put("measured", finding.measured());
            putMet(each, finding);
            putRange(each, finding);
        }
        return text(node);
    }

    /** {@code machine.json}. */
    public static String machine(Machine machine) {
        return text(JSON.createObjectNode()
                .put("started", machine.started())
                .put("processors", machine.processors())
                .put("memory", machine.memoryBytes())
                .put("os", machine.system())
                .put("java", machine.java())
                .put("transport", machine.transport())
                .put("engine", machine.engine()));
    }

    private static void putCast(ObjectNode node, Cast cast) {
        ArrayNode hosts = node.putArray("hosts");
        for (Host host : cast.hosts()) {
            hosts.addObject()
                    .put("name", host.name())
                    .put("weight", host.weight())
                    .put("zone", host.zone());
        }
        ArrayNode pools = node.putArray("pools");
        for (Pool pool : cast.pools()) {
            ObjectNode each = pools.addObject()
                    .put("name", pool.name())
                    .put("method", pool.method().word())
                    .put("count", pool.count().word())
                    .put("weights", pool.weights().word());
            ObjectNode settings = each.putObject("settings");
            PoolWords.settings(pool).forEach(settings::put);
        }
        ArrayNode backends = node.putArray("backends");
        for (int b = 0; b < cast.backends().size(); b++) {
            Backend backend = cast.backends().get(b);
            backends.addObject()
                    .put("name", backend.name())
                    .put("pool", cast.pools().get(cast.poolOf(b)).name())
                    .put("host", backend.host())
                    .put("weight", backend.weight());
        }
    }

    private static void putFindings(ArrayNode array, List<Finding> findings) {
        for (Finding finding : findings) {
            ObjectNode node = array.addObject()
                    .put("measure", finding.measure().word())
                    .put("of", finding.of())
                    .put("text", finding.text());
            Bound bound = finding.bound();
            if (bound != null) {
                node.put("bound", finding.boundText());
            }
            node.put("measured", finding.measured());
            putRange(node, finding);
            if (bound != null) {
                putMet(node.put("margin", finding.marginText()), finding);
            }
            node.put("why", finding.note());
        }
    }

    /** Adds the value, the ends of its bound where there is one, and the unit of all of them. */
    private static void putRange(ObjectNode node, Finding finding) {
        Unit unit = finding.measure().unit();
        Bound bound = finding.bound();
        putValue(node, "value", unit, finding.value());
        if (bound != null) {
            putValue(node, "least", unit, bound.least());
            putValue(node, "most", unit, bound.most());
        }
        node.put("unit", Words.of(unit));
    }

    /** Null where it is not known. */
    private static void putMet(ObjectNode node, Finding finding) {
        if (finding.reached()) {
            node.put("met", finding.met());
        } else {
            node.putNull("met");
        }
    }

    /** Adds a value: durations in seconds, everything else as it is; null where there is no finite value. */
    public static void putValue(ObjectNode node, String key, Unit unit, double value) {
        if (Double.isNaN(value) || Double.isInfinite(value)) {
            node.putNull(key);
        } else {
            node.put(key, unit == Unit.DURATION ? value / 1e9 : value);
        }
    }

    /** A file's text: indented, with a line feed at its end. */
    public static String text(ObjectNode node) {
        try {
            return PRETTY.writeValueAsString(node) + "\n";
        } catch (JsonProcessingException e) {
            throw new IllegalStateException("a tree of plain values cannot be written", e);
        }
    }
}
