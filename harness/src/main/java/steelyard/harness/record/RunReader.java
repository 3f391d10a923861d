package steelyard.harness.record;

import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Function;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.RunData.BackendRow;
import steelyard.harness.record.RunData.CueRow;
import steelyard.harness.record.RunData.FindingRow;
import steelyard.harness.record.RunData.ForecastRow;
import steelyard.harness.record.RunData.GroupRow;
import steelyard.harness.record.RunData.HostRow;
import steelyard.harness.record.RunData.PoolRow;
import steelyard.harness.record.RunData.ReadingRow;
import steelyard.harness.record.RunData.StandingRow;
import steelyard.harness.record.RunData.VerdictRow;

/** Reads a run folder back. A last row that a kill cut short is left out. */
final class RunReader {
    private static final ObjectMapper JSON = new ObjectMapper();
    private static final int STANDING_OF_ONE = 6;

    private final RunFolder folder;

    RunReader(RunFolder folder) {
        this.folder = folder;
    }

    RunData read() throws FolderRefused {
        JsonNode run = json(RunFolder.RUN);
        int format = run.path("format").asInt();
        if (format != RunJson.FORMAT) {
            throw new FolderRefused(
                    folder.path() + " is of format " + format + "; this version reads format " + RunJson.FORMAT);
        }
        JsonNode cast = run.path("cast");
        JsonNode verdict = run.path("verdict");
        return new RunData(
                run.path("drill").asText(),
                run.path("about").asText(),
                run.path("stage").asText(),
                run.path("backends").asText(),
                run.path("seed").asLong(),
                run.path("lasts").asDouble(),
                run.path("ended").asText(),
                run.path("versions").path("steelyard").asText(),
                list(cast.path("hosts"), RunReader::host),
                list(cast.path("pools"), RunReader::pool),
                list(cast.path("backends"), RunReader::backend),
                verdict.isObject()
                        ? new VerdictRow(
                                verdict.path("met").asBoolean(),
                                verdict.path("fit").asBoolean(),
                                verdict.path("text").asText())
                        : null,
                list(run.path("expectations"), FindingRow::of),
                list(run.path("measures"), FindingRow::of),
                list(run.path("checks"), RunReader::check),
                run.path("source").asText(),
                machine(),
                slices(),
                rows(RunFolder.STANDING).stream().map(RunReader::standing).toList(),
                rows(RunFolder.CUES).stream().map(RunReader::cue).toList(),
                rows(RunFolder.READINGS).stream().map(RunReader::reading).toList(),
                forecast(run.path("forecast")));
    }

    private static @Nullable ForecastRow forecast(JsonNode node) {
        return node.isObject()
                ? new ForecastRow(
                        node.path("plays").asInt(),
                        node.path("wanted").asInt(),
                        node.path("hold").asDouble(),
                        node.path("quantiles").asText(),
                        node.path("interval").asText(),
                        node.path("bandPlays").asInt(),
                        list(
                                node.path("rows"),
                                row -> new GroupRow(
                                        row.path("name").asText(),
                                        row.path("pool").asText(),
                                        row.path("backends").asInt())))
                : null;
    }

    private static HostRow host(JsonNode node) {
        JsonNode zone = node.path("zone");
        return new HostRow(
                node.path("name").asText(), node.path("weight").asInt(), zone.isTextual() ? zone.asText() : null);
    }

    private static PoolRow pool(JsonNode node) {
        Map<String, String> settings = new LinkedHashMap<>();
        node.path("settings")
                .properties()
                .forEach(each -> settings.put(each.getKey(), each.getValue().asText()));
        return new PoolRow(
                node.path("name").asText(),
                node.path("method").asText(),
                node.path("count").asText(),
                node.path("weights").asText(),
                settings);
    }

    private static BackendRow backend(JsonNode node) {
        return new BackendRow(
                node.path("name").asText(),
                node.path("pool").asText(),
                node.path("host").asText(),
                node.path("weight").asInt());
    }

    private static SelfCheck check(JsonNode node) {
        return new SelfCheck(
                node.path("check").asText(),
                node.path("ok").asBoolean(),
                node.path("text").asText());
    }

    private static StandingRow standing(List<String> row) {
        double at = Double.parseDouble(row.get(0));
        boolean pickable = Boolean.parseBoolean(row.get(5));
        return row.size() == STANDING_OF_ONE
                ? new StandingRow(at, row.get(1), row.get(2), row.get(3), row.get(4), pickable)
                : new StandingRow(
                        at,
                        row.get(1),
                        row.get(2),
                        row.get(3),
                        row.get(4),
                        pickable,
                        Double.parseDouble(row.get(6)),
                        Double.parseDouble(row.get(7)),
                        Double.parseDouble(row.get(8)));
    }

    private static CueRow cue(List<String> row) {
        return new CueRow(
                Double.parseDouble(row.get(0)), Double.parseDouble(row.get(1)), row.get(2), row.get(3), row.get(4));
    }

    private static ReadingRow reading(List<String> row) {
        return new ReadingRow(
                Double.parseDouble(row.get(0)),
                row.get(1),
                Long.parseLong(row.get(2)),
                Double.parseDouble(row.get(3)),
                Boolean.parseBoolean(row.get(4)));
    }

    private Map<String, String> machine() throws FolderRefused {
        Map<String, String> words = new LinkedHashMap<>();
        if (Files.exists(folder.file(RunFolder.MACHINE))) {
            json(RunFolder.MACHINE).properties().forEach(each -> {
                if (!each.getValue().isNull()) {
                    words.put(each.getKey(), each.getValue().asText());
                }
            });
        }
        return words;
    }

    private Slices slices() throws FolderRefused {
        List<String> head = head(lines(RunFolder.SLICES));
        List<List<String>> rows = rows(RunFolder.SLICES);
        Map<String, double[]> numbers = new LinkedHashMap<>();
        Map<String, String[]> words = new LinkedHashMap<>();
        for (int column = 0; column < head.size(); column++) {
            int place = column;
            String name = head.get(column);
            if (name.endsWith(":standing")) {
                words.put(name, rows.stream().map(row -> row.get(place)).toArray(String[]::new));
            } else {
                numbers.put(
                        name,
                        rows.stream().mapToDouble(row -> number(row.get(place))).toArray());
            }
        }
        return new Slices(rows.size(), numbers, words);
    }

    private static double number(String field) {
        return field.isEmpty() ? Double.NaN : Double.parseDouble(field);
    }

    /** The rows behind the head that have all their fields and their line end. */
    private List<List<String>> rows(String name) throws FolderRefused {
        List<String> lines = lines(name);
        int fields = head(lines).size();
        List<List<String>> rows = new ArrayList<>();
        for (String line : lines.subList(Math.min(1, lines.size()), lines.size())) {
            List<String> row = Csv.fields(line);
            if (row.size() == fields) {
                rows.add(row);
            }
        }
        return rows;
    }

    private static List<String> head(List<String> lines) {
        return lines.isEmpty() ? List.of() : Csv.fields(lines.get(0));
    }

    private List<String> lines(String name) throws FolderRefused {
        Path file = folder.file(name);
        if (!Files.exists(file)) {
            return List.of();
        }
        try {
            String text = Files.readString(file, StandardCharsets.UTF_8);
            return text.substring(0, text.lastIndexOf('\n') + 1).lines().toList();
        } catch (IOException e) {
            throw new FolderRefused(file + " cannot be read", e);
        }
    }

    private JsonNode json(String name) throws FolderRefused {
        Path file = folder.file(name);
        try {
            return JSON.readTree(Files.readString(file, StandardCharsets.UTF_8));
        } catch (IOException e) {
            throw new FolderRefused(file + " cannot be read as JSON", e);
        }
    }

    private static <T> List<T> list(JsonNode array, Function<JsonNode, T> reading) {
        List<T> values = new ArrayList<>();
        array.forEach(each -> values.add(reading.apply(each)));
        return List.copyOf(values);
    }
}
