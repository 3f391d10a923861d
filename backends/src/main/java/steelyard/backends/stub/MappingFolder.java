package steelyard.backends.stub;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ObjectNode;
import com.github.tomakehurst.wiremock.common.ClientError;
import com.github.tomakehurst.wiremock.stubbing.StubMapping;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.UUID;
import java.util.stream.Stream;
import steelyard.backends.behave.RouteDelay;

/**
 * Reads mapping files. Delays are taken out of them: the behaviour adds them to the work, so that they hold a worker and
 * are drawn by key; the engine never sleeps.
 *
 * <p>What would reach beyond the stub (proxying, calls after an answer) or belongs to the drill's cues (wire faults) is
 * refused here rather than played differently from what the file says.
 */
final class MappingFolder {

    /** One mapping, without its delays, and the work that they come to. */
    record Route(StubMapping mapping, RouteDelay delay) {}

    private static final ObjectMapper JSON = new ObjectMapper();

    private final Path folder;
    private final List<Route> routes = new ArrayList<>();

    private MappingFolder(Path folder) {
        this.folder = folder;
    }

    static List<Route> read(Path folder) throws BadAnswers {
        MappingFolder reader = new MappingFolder(folder);
        for (Path file : reader.files()) {
            reader.readFile(file);
        }
        if (reader.routes.isEmpty()) {
            throw new BadAnswers(folder + ": no mapping in it; expected mappings/*.json or *.json");
        }
        return reader.routes;
    }

    private List<Path> files() throws BadAnswers {
        if (!Files.isDirectory(folder)) {
            throw new BadAnswers(folder + ": no such folder of mapping files");
        }
        Path inner = folder.resolve("mappings");
        boolean nested = Files.isDirectory(inner);
        try (Stream<Path> found = Files.walk(nested ? inner : folder, nested ? Integer.MAX_VALUE : 1)) {
            return found.filter(file -> file.toString().endsWith(".json") && Files.isRegularFile(file))
                    .sorted()
                    .toList();
        } catch (IOException failure) {
            throw new BadAnswers(folder + ": cannot be listed: " + failure.getMessage(), failure);
        }
    }

    private void readFile(Path file) throws BadAnswers {
        JsonNode root = parse(file);
        if (root.path("mappings").isArray()) {
            for (JsonNode one : root.get("mappings")) {
                addRoute(file, one);
            }
        } else {
            addRoute(file, root);
        }
    }

    private static JsonNode parse(Path file) throws BadAnswers {
        try {
            return JSON.readTree(Files.readString(file));
        } catch (JsonProcessingException failure) {
            throw new BadAnswers(
                    file + ":" + failure.getLocation().getLineNr() + ": not JSON: "
                            + firstLine(failure.getOriginalMessage()),
                    failure);
        } catch (IOException failure) {
            throw new BadAnswers(file + ": cannot be read: " + failure.getMessage(), failure);
        }
    }

    private void addRoute(Path file, JsonNode node) throws BadAnswers {
        if (!(node instanceof ObjectNode mapping) || !(mapping.get("response") instanceof ObjectNode response)) {
            throw new BadAnswers(file + ": not a mapping; expected an object with request and response");
        }
        refuseWhatIsNotPlayed(file, mapping, response);
        requireBodyFile(file, response);
        RouteDelay delay = takeDelay(file, response);
        routes.add(new Route(build(file, mapping), delay));
    }

    private static void refuseWhatIsNotPlayed(Path file, ObjectNode mapping, ObjectNode response) throws BadAnswers {
        for (String key : List.of("proxyBaseUrl", "fault")) {
            if (response.hasNonNull(key)) {
                throw new BadAnswers(file + ": response." + key + " is not played by a backend; "
                        + (key.equals("fault")
                                ? "use a cue of the drill instead"
                                : "write the answer into the mapping"));
            }
        }
        for (String key : List.of("postServeActions", "serveEventListeners")) {
            if (mapping.path(key).size() > 0) {
                throw new BadAnswers(file + ": " + key + " is not played by a backend; take it out");
            }
        }
    }

    private void requireBodyFile(Path file, ObjectNode response) throws BadAnswers {
        JsonNode name = response.get("bodyFileName");
        if (name != null && !name.asText().contains("{{")) {
            Path body = folder.resolve("__files").resolve(name.asText());
            if (!Files.isReadable(body)) {
                throw new BadAnswers(
                        file + ": bodyFileName " + name.asText() + " is not in " + folder.resolve("__files"));
            }
        }
    }

    private static RouteDelay takeDelay(Path file, ObjectNode response) throws BadAnswers {
        try {
            return MappingDelay.takeFrom(response);
        } catch (IllegalArgumentException failure) {
            throw new BadAnswers(file + ": delay cannot be used: " + failure.getMessage(), failure);
        }
    }

    private StubMapping build(Path file, ObjectNode mapping) throws BadAnswers {
        // An id of its own for each route, the same in every play, ties an answer to its delay.
        String seed = folder.relativize(file) + "#" + routes.size();
        mapping.put(
                "id",
                UUID.nameUUIDFromBytes(seed.getBytes(StandardCharsets.UTF_8)).toString());
        mapping.remove("uuid");
        try {
            return StubMapping.buildFrom(mapping.toString());
        } catch (RuntimeException failure) {
            // Whatever the engine trips over in a file is the file's fault.
            throw new BadAnswers(file + ": not a mapping: " + reason(failure), failure);
        }
    }

    private static String reason(RuntimeException failure) {
        return plain(firstLine(String.valueOf(
                failure instanceof ClientError told ? told.getErrors().first().getDetail() : failure.getMessage())));
    }

    /** The engine names its own classes, which say nothing to whoever wrote the file. */
    private static String plain(String reason) {
        return reason.replaceAll("\\s*\\(class [^)]*\\)", "")
                .replace(", not marked as ignorable", "")
                .replaceAll("`?(?:[a-z]\\w*\\.)+[A-Z][\\w$.]*`?", "such a value");
    }

    private static String firstLine(String text) {
        return text.lines().findFirst().orElse("unreadable");
    }
}
