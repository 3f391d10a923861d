package steelyard.harness.report;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.MissingNode;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.IntStream;
import java.util.stream.StreamSupport;

/**
 * What the report needs of a run folder.
 *
 * @param run {@code run.json}
 * @param machine {@code machine.json}, or a missing node
 */
record RunFiles(JsonNode run, JsonNode machine, Slices slices, List<CueRow> cues, List<Change> changes) {
    private static final int FORMAT = 1;

    static RunFiles read(Path folder) throws IOException {
        JsonNode run = json(folder.resolve("run.json"));
        int format = run.path("format").asInt();
        if (format != FORMAT) {
            throw new IOException("run.json: format " + format + ", this version reads format " + FORMAT);
        }
        Path machine = folder.resolve("machine.json");
        Slices slices = Slices.of(CsvTable.read(folder.resolve("slices.csv")), Backend.list(run));
        return new RunFiles(
                run,
                Files.exists(machine) ? json(machine) : MissingNode.getInstance(),
                slices,
                CueRow.list(CsvTable.read(folder.resolve("cues.csv"))),
                Change.list(CsvTable.read(folder.resolve("standing.csv"))));
    }

    List<Backend> backends() {
        return slices.backends();
    }

    List<String> pools() {
        return StreamSupport.stream(run.at("/cast/pools").spliterator(), false)
                .map(pool -> pool.path("name").asText())
                .toList();
    }

    /** The length that the drill asks for, in seconds. */
    double lasts() {
        return run.path("lasts").asDouble();
    }

    /** How long the play was recorded, in seconds. */
    double played() {
        return slices.size() == 0 ? 0 : slices.from()[slices.size() - 1] + Slices.SECONDS;
    }

    private static JsonNode json(Path path) throws IOException {
        try {
            return new ObjectMapper().readTree(Files.readString(path));
        } catch (JsonProcessingException e) {
            throw new IOException(path.getFileName() + ": not JSON: " + e.getOriginalMessage(), e);
        }
    }

    /** A backend in list order. */
    record Backend(String name, String pool, String host, String weight) {
        static List<Backend> list(JsonNode run) {
            return StreamSupport.stream(run.at("/cast/backends").spliterator(), false)
                    .map(each -> new Backend(
                            each.path("name").asText(),
                            each.path("pool").asText(),
                            each.path("host").asText(),
                            each.path("weight").asText()))
                    .toList();
        }
    }

    /** A row of {@code cues.csv}; times in seconds. */
    record CueRow(double due, double at, String cue, String action, String by) {
        static List<CueRow> list(CsvTable table) throws IOException {
            double[] due = table.numbers("due");
            double[] at = table.numbers("at");
            List<String> cue = table.words("cue");
            List<String> action = table.words("action");
            List<String> by = table.words("by");
            return IntStream.range(0, table.size())
                    .mapToObj(row -> new CueRow(due[row], at[row], cue.get(row), action.get(row), by.get(row)))
                    .toList();
        }
    }

    /** A row of {@code standing.csv}; time in seconds. */
    record Change(double at, String backend, String from, String to, String cause) {
        static List<Change> list(CsvTable table) throws IOException {
            double[] at = table.numbers("at");
            List<String> backend = table.words("backend");
            List<String> from = table.words("from");
            List<String> to = table.words("to");
            List<String> cause = table.words("cause");
            return IntStream.range(0, table.size())
                    .mapToObj(row -> new Change(at[row], backend.get(row), from.get(row), to.get(row), cause.get(row)))
                    .toList();
        }
    }
}
