package steelyard.drills.read;

import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Serves;

/** Reads {@code serves:}, of a pool or of a backend. */
final class ServesReader {
    private static final Quantity<Integer> WORKERS = Numbers.from(1, 100_000);
    private static final Quantity<Integer> QUEUE = Numbers.from(0, 10_000_000);
    private static final Quantity<String> PROBE_WORK = Words.of("a kind of probe work", "queued", "free");
    private static final Quantity<Double> FACTOR =
            Numbers.NUMBER.that(n -> n >= 1 && n <= 1_000, "is out of range", "write a number from 1 to 1000");

    private final Problems problems;
    private final @Nullable Path folder;
    private final TimeReader times;

    /** With the folder that names of files start from, or null to leave such names as they are. */
    ServesReader(Problems problems, @Nullable Path folder) {
        this.problems = problems;
        this.folder = folder;
        this.times = new TimeReader(problems, folder);
    }

    Draft read(Fields owner) {
        Fields fields = owner.map("serves", Keys.SERVES);
        return new Draft(
                fields.has("workers") ? fields.read("workers", WORKERS, 1) : null,
                fields.read("queue", QUEUE),
                times.read(fields),
                fields.read("body", Sizes.SIZE),
                probesQueue(fields),
                fields.read("probe-loss", Shares.SHARE),
                answers(fields),
                cold(fields),
                gauges(fields));
    }

    private static @Nullable Boolean probesQueue(Fields fields) {
        String word = fields.read("probe-work", PROBE_WORK);
        return word == null ? null : Boolean.valueOf(word.equals("queued"));
    }

    private Serves.@Nullable Cold cold(Fields serves) {
        if (!serves.has("cold")) {
            return null;
        }
        Fields fields = serves.map("cold", Keys.COLD);
        return new Serves.Cold(
                fields.need("factor", FACTOR, 1.0), fields.need("decay", Durations.POSITIVE, Durations.SECOND));
    }

    private @Nullable List<Serves.Gauge> gauges(Fields serves) {
        if (!serves.has("gauges")) {
            return null;
        }
        List<Serves.Gauge> gauges = new ArrayList<>();
        for (Node.Entry entry : serves.gauges("gauges")) {
            if (entry.key().equals(Serves.CPU)) {
                problems.add(
                        entry.place(),
                        "the gauge cpu is the busy share of the workers",
                        "leave it out; every backend has it");
            } else if (entry.value() instanceof Node.Scalar) {
                Double base = Shares.SHARE.read(entry.value(), entry.key(), problems);
                gauges.add(new Serves.Gauge(entry.key(), base == null ? 0 : base, 0));
            } else {
                Fields fields = Fields.open(entry.value(), Keys.GAUGE, problems);
                gauges.add(new Serves.Gauge(
                        entry.key(), fields.need("base", Shares.SHARE, 0.0), fields.read("each", Shares.SHARE, 0.0)));
            }
        }
        return gauges;
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
            @Nullable String answers,
            Serves.@Nullable Cold cold,
            @Nullable List<Serves.Gauge> gauges) {

        /** What this says, and where it says nothing what the other one says. */
        Draft over(Draft other) {
            return new Draft(
                    first(workers, other.workers),
                    first(queue, other.queue),
                    first(time, other.time),
                    first(bodyBytes, other.bodyBytes),
                    first(probesQueue, other.probesQueue),
                    first(probeLoss, other.probeLoss),
                    first(answers, other.answers),
                    first(cold, other.cold),
                    first(gauges, other.gauges));
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
                    or(time, TimeReader.HARMLESS),
                    or(bodyBytes, 512),
                    or(probesQueue, Boolean.FALSE),
                    or(probeLoss, 0.0),
                    answers,
                    cold,
                    or(gauges, List.of()));
        }

        private static <T> @Nullable T first(@Nullable T one, @Nullable T other) {
            return one == null ? other : one;
        }

        private static <T> T or(@Nullable T value, T otherwise) {
            return value == null ? otherwise : value;
        }
    }
}
