package steelyard.drills.read;

import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Serves;

/** Reads {@code serves:}, of a pool or of a backend. */
final class ServesReader {
    private static final Quantity<Integer> WORKERS = Numbers.from(1, 100_000);
    private static final Quantity<Integer> QUEUE = Numbers.from(0, 10_000_000);
    private static final Quantity<String> PROBE_WORK = Words.of("a kind of probe work", "queued", "free");
    private static final Serves.Time HARMLESS_TIME = Serves.Time.fixed(1_000_000);

    private final Problems problems;
    private final @Nullable Path folder;

    /** With the folder that {@code answers:} starts from, or null to leave such names as they are. */
    ServesReader(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.folder = folder;
    }

    Draft read(Fields owner) {
        Fields fields = owner.map("serves", Keys.SERVES);
        return new Draft(
                fields.has("workers") ? fields.read("workers", WORKERS, 1) : null,
                fields.read("queue", QUEUE),
                time(fields),
                fields.read("body", Sizes.SIZE),
                probesQueue(fields),
                fields.read("probe-loss", Shares.SHARE),
                answers(fields));
    }

    private static @Nullable Boolean probesQueue(Fields fields) {
        String word = fields.read("probe-work", PROBE_WORK);
        return word == null ? null : Boolean.valueOf(word.equals("queued"));
    }

    private Serves.@Nullable Time time(Fields serves) {
        Node node = serves.node("time");
        if (node == null) {
            return null;
        }
        if (node instanceof Node.Scalar) {
            return Serves.Time.fixed(serves.read("time", Durations.POSITIVE, 1_000_000L));
        }
        Fields fields = Fields.open(node, Keys.TIME, problems);
        List<String> laws = fields.given();
        if (laws.size() != 1) {
            if (!fields.odd()) {
                problems.add(node.place(), "a time follows one law", "write fixed, exponential or lognormal");
            }
            return HARMLESS_TIME;
        }
        return switch (laws.get(0)) {
            case "fixed" -> Serves.Time.fixed(fields.read("fixed", Durations.POSITIVE, 1_000_000L));
            case "exponential" -> Serves.Time.exponential(fields.read("exponential", Durations.POSITIVE, 1_000_000L));
            default -> lognormal(fields.map("lognormal", Keys.LOGNORMAL));
        };
    }

    private Serves.Time lognormal(Fields fields) {
        long median = fields.need("median", Durations.POSITIVE, 1L);
        long p99 = fields.need("99%", Durations.POSITIVE, Durations.DAY + 1);
        if (p99 <= median) {
            problems.add(
                    fields.valuePlace("99%"),
                    "the 99 % quantile is not above the median",
                    "write more than " + Durations.text(median));
            return HARMLESS_TIME;
        }
        return Serves.Time.lognormal(median, p99);
    }

    private @Nullable String answers(Fields fields) {
        String name = fields.read("answers", Names.FOLDER);
        if (name == null || folder == null) {
            return name;
        }
        try {
            Path answers = folder.resolve(name);
            if (!Files.isDirectory(answers)) {
                problems.add(
                        fields.valuePlace("answers"),
                        "there is no folder " + Quantity.quoted(name),
                        "name a folder of mapping files, beginning at the folder of the drill");
            }
            return answers.toString();
        } catch (InvalidPathException e) {
            problems.add(fields.valuePlace("answers"), "no folder has such a name", "write the name of a folder");
            return name;
        }
    }

    /** What was said; null for what was left out. */
    record Draft(
            @Nullable Integer workers,
            @Nullable Integer queue,
            Serves.@Nullable Time time,
            @Nullable Integer bodyBytes,
            @Nullable Boolean probesQueue,
            @Nullable Double probeLoss,
            @Nullable String answers) {

        /** What this says, and where it says nothing what the other one says. */
        Draft over(Draft other) {
            return new Draft(
                    first(workers, other.workers),
                    first(queue, other.queue),
                    first(time, other.time),
                    first(bodyBytes, other.bodyBytes),
                    first(probesQueue, other.probesQueue),
                    first(probeLoss, other.probeLoss),
                    first(answers, other.answers));
        }

        /** The keys that have no value of their own and were left out. */
        List<String> missing() {
            return workers == null
                    ? time == null ? List.of("workers", "time") : List.of("workers")
                    : time == null ? List.of("time") : List.of();
        }

        Serves build() {
            return new Serves(
                    or(workers, 1),
                    or(queue, 64),
                    or(time, HARMLESS_TIME),
                    or(bodyBytes, 512),
                    or(probesQueue, Boolean.FALSE),
                    or(probeLoss, 0.0),
                    answers);
        }

        private static <T> @Nullable T first(@Nullable T one, @Nullable T other) {
            return one == null ? other : one;
        }

        private static <T> T or(@Nullable T value, T otherwise) {
            return value == null ? otherwise : value;
        }
    }
}
