package steelyard.drills.read;

import java.math.BigDecimal;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Measure;
import steelyard.drills.model.Standing;

/** Reads one expectation. */
final class ExpectationReader {
    private static final Quantity<Measure> MEASURE = Words.of("a measure", Measure.values());
    private static final Quantity<Cause> CAUSE = Words.of("a cause", Cause.values());
    private static final Quantity<Standing> STANDING = Words.of("a standing", Standing.values());
    private static final Quantity<String> CUE_NAME = Names.some("the name of a cue", "fulmar dies");
    private static final Quantity<Double> QUANTILE = Quantity.of(
                    "a quantile", "99%, or mean", ExpectationReader::quantile)
            .that(
                    q -> q == -1 || (q > 0 && q < 1),
                    "is out of range",
                    "write more than 0% and less than 100%, or mean");
    private static final Quantity<Double> COUNT = Quantity.of("a count", "3", ExpectationReader::count)
            .that(n -> n >= 0, "is negative", "write a whole number of at least 0");
    private static final Quantity<Double> TIME = Quantity.of(
                    "a duration", "15s, 250ms, 1.5s or 1m30s", ExpectationReader::time)
            .withUnits(List.of("ms", "s", "m"));

    private static final List<String> BOUNDS = List.of("at-most", "at-least", "between");
    private static final List<String> EVERYWHERE = List.of("measure", "of", "at-most", "at-least", "between");

    private final Problems problems;

    ExpectationReader(Problems problems) {
        this.problems = problems;
    }

    /** The draft; null when not even the measure is known. */
    @Nullable
    ExpectationDraft read(Node node) {
        Fields fields = Fields.open(node, Keys.EXPECTATION, keysOf(node), problems);
        if (!fields.has("measure")) {
            fields.missing("measure", "write measure: failed, or another one");
            return null;
        }
        Measure measure = fields.read("measure", MEASURE);
        if (measure == null) {
            return null;
        }
        refuseStrangeKeys(fields, measure);
        String after = fields.read("after", CUE_NAME);
        return new ExpectationDraft(
                node.place(),
                measure,
                TargetDraft.read(fields, "of"),
                fields.has("from") ? Instant.read(fields, "from") : null,
                fields.has("to") ? Instant.read(fields, "to") : null,
                after == null ? null : new Placed<>(fields.valuePlace("after"), after),
                fields.has("worst") ? fields.valuePlace("worst") : null,
                options(fields),
                bound(fields, measure));
    }

    /** The keys that an expectation may have: those of its measure, or all where that is not known. */
    private static List<String> keysOf(Node node) {
        List<String> keys = Keys.EXPECTATION.words();
        for (Node.Entry entry : node instanceof Node.Entries map ? map.list() : List.<Node.Entry>of()) {
            for (Measure measure : Measure.values()) {
                if (entry.key().equals("measure")
                        && entry.value() instanceof Node.Scalar word
                        && word.text().equals(measure.word())) {
                    List<String> own = own(measure);
                    keys = keys.stream()
                            .filter(key -> EVERYWHERE.contains(key) || own.contains(key))
                            .toList();
                }
            }
        }
        return keys;
    }

    private static List<String> own(Measure measure) {
        List<String> own = new ArrayList<>(optionsOf(measure));
        own.addAll(measure.countsFromCue() ? List.of("after") : List.of("from", "to"));
        return own;
    }

    private void refuseStrangeKeys(Fields fields, Measure measure) {
        List<String> own = own(measure);
        for (String key : fields.given()) {
            if (!EVERYWHERE.contains(key) && !own.contains(key)) {
                String remedy =
                        key.equals("after") ? "write from: and the name of the cue" : "it knows " + Sentence.and(own);
                problems.add(fields.keyPlace(key), measure.word() + " does not know '" + key + "'", remedy);
            }
        }
        if (measure.countsFromCue() && !fields.has("after")) {
            fields.missing("after", measure.word() + " counts from a cue, write its name");
        }
    }

    private static List<String> optionsOf(Measure measure) {
        return switch (measure) {
            case FAILED -> List.of("cause", "worst");
            case RETRY_LOAD -> List.of("worst");
            case LONGEST_OUTAGE -> List.of("share");
            case LATENCY -> List.of("quantile");
            case DETECTED_IN -> List.of("until");
            case STANDING_CHANGES -> List.of("shown");
            case SHARE,
                    SHIFTED_IN,
                    SETTLED_IN,
                    DRAINED_IN,
                    CUT,
                    PEAK_IN_FLIGHT,
                    PEAK_UTILISATION,
                    FAIRNESS,
                    WEIGHT_LAG,
                    SWING -> List.of();
        };
    }

    private static Expectation.Options options(Fields fields) {
        Expectation.Options none = Expectation.Options.DEFAULT;
        List<Cause> causes = fields.values("cause", CAUSE);
        Set<Cause> chosen = causes.isEmpty() ? none.causes() : EnumSet.copyOf(causes);
        return new Expectation.Options(
                fields.read("quantile", QUANTILE, none.quantile()),
                chosen,
                fields.read("worst", Durations.POSITIVE, none.worstNanos()),
                fields.read("until", STANDING),
                fields.read("shown", Numbers.YES_OR_NO, none.shown()),
                fields.read("share", Shares.ABOVE_ZERO, none.outageShare()));
    }

    private Expectation.Bound bound(Fields fields, Measure measure) {
        Quantity<Double> unit = unit(measure.unit());
        List<String> given = fields.given().stream().filter(BOUNDS::contains).toList();
        if (given.size() != 1) {
            if (!fields.odd()) {
                problems.add(
                        given.isEmpty() ? fields.place() : fields.keyPlace(given.get(1)),
                        given.isEmpty() ? "the expectation has no bound" : "the expectation has more than one bound",
                        "write one of at-most, at-least and between");
            }
            return any();
        }
        return switch (given.get(0)) {
            case "at-most" ->
                new Expectation.Bound(Double.NEGATIVE_INFINITY, fields.read("at-most", unit, Double.POSITIVE_INFINITY));
            case "at-least" ->
                new Expectation.Bound(
                        fields.read("at-least", unit, Double.NEGATIVE_INFINITY), Double.POSITIVE_INFINITY);
            default -> between(fields, unit);
        };
    }

    private Expectation.Bound between(Fields fields, Quantity<Double> unit) {
        Node node = fields.node("between");
        List<Node> ends = fields.list("between");
        if (ends.size() != 2) {
            if (node instanceof Node.Items) {
                problems.add(node.place(), "between takes two values", "write [least, most]");
            }
            return any();
        }
        Double least = unit.read(ends.get(0), "between", problems);
        Double most = unit.read(ends.get(1), "between", problems);
        if (least == null || most == null) {
            return any();
        }
        if (least > most) {
            problems.add(
                    ends.get(0).place(),
                    "the bound holds nothing: it begins above its end",
                    "write the lesser value first");
            return any();
        }
        return new Expectation.Bound(least, most);
    }

    private static Expectation.Bound any() {
        return new Expectation.Bound(Double.NEGATIVE_INFINITY, Double.POSITIVE_INFINITY);
    }

    private static Quantity<Double> unit(Measure.Unit unit) {
        return switch (unit) {
            case SHARE -> Shares.SHARE;
            case DURATION -> TIME;
            case COUNT -> COUNT;
            case NUMBER -> Numbers.NOT_NEGATIVE;
        };
    }

    private static @Nullable Double time(String text) {
        Long nanos = Durations.nanos(text);
        return nanos == null ? null : Double.valueOf(nanos);
    }

    private static @Nullable Double count(String text) {
        BigDecimal value = Numbers.decimal(text);
        return value == null || value.scale() != 0 ? null : Double.valueOf(value.doubleValue());
    }

    private static @Nullable Double quantile(String text) {
        if (text.equals("mean")) {
            return -1.0;
        }
        BigDecimal number = text.endsWith("%")
                ? Numbers.decimal(text.substring(0, text.length() - 1).strip())
                : null;
        return number == null || number.signum() < 0
                ? null
                : Double.valueOf(number.movePointLeft(2).doubleValue());
    }
}
