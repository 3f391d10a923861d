package steelyard.drills.read;

import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.drills.model.Expectation;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Traffic;

/**
 * Reads drills. No text and no file makes it throw: what is wrong comes back as {@link Problem}s, all of one text at
 * once (YAML that cannot be parsed has one). Stateless; any thread may call.
 */
public final class DrillReader {
    /** A larger file is refused before it is parsed. */
    public static final int MOST_BYTES = 1 << 20;

    private DrillReader() {}

    /** Reads a file; what it names is looked up from the folder that it is in, and has to be there. */
    public static Parsed<Drill> read(Path file) {
        Problems problems = new Problems(file.toString());
        String text = load(file, problems);
        return text == null
                ? refused(problems)
                : read(text, problems, file.toAbsolutePath().getParent());
    }

    /**
     * Reads a text under a name for messages. Names of folders and files are kept as they stand, and a trace, which has
     * to be read, is a problem.
     */
    public static Parsed<Drill> read(String name, String text) {
        return read(text, new Problems(name), null);
    }

    /** Reads a text under a name for messages as if it were a file in a folder. */
    public static Parsed<Drill> read(String name, String text, Path folder) {
        return read(text, new Problems(name), folder);
    }

    /**
     * Reads a cue that a person sends while a drill is played: {@code kill: fulmar}, with or without braces, with the
     * keys of a cue of a file but {@code times} and {@code every}. Without {@code at} its instant is 0, and whoever
     * plays it sets the true one. Its name differs from those of the drill's cues.
     */
    public static Parsed<Cue> readCue(String yamlFlow, Drill drill) {
        Problems problems = new Problems("cue");
        if (yamlFlow.isBlank()) {
            problems.add(Place.START, "there is no cue", "write one, such as kill: fulmar");
            return refused(problems);
        }
        Node node = tree(yamlFlow, problems);
        if (node == null) {
            return refused(problems);
        }
        CueDraft draft = new CueReader(problems).readByHand(node);
        Roster roster = new Roster(drill.stage());
        List<Cue> cues = new CueSchedule(problems, roster, drill.cues(), drill.lastsNanos()).schedule(List.of(draft));
        return problems.any() ? refused(problems) : new Parsed<>(Optional.of(cues.get(0)), problems.inOrder());
    }

    private static Parsed<Drill> read(String text, Problems problems, @Nullable Path folder) {
        Node root = tree(text, problems);
        if (root == null) {
            return refused(problems);
        }
        if (!(root instanceof Node.Entries)) {
            problems.add(
                    root.place(),
                    "not a drill: the file holds " + root.noun(),
                    "a drill begins with drill: and its title");
            return refused(problems);
        }
        Drill drill = drill(Fields.open(root, Keys.DRILL, problems), problems, folder);
        return drill == null || problems.any()
                ? refused(problems)
                : new Parsed<>(Optional.of(drill), problems.inOrder());
    }

    private static @Nullable Drill drill(Fields fields, Problems problems, @Nullable Path folder) {
        String name = fields.need("drill", Names.TITLE, "");
        String about = fields.need("about", Names.ABOUT, "");
        long lasts = fields.need("lasts", Durations.POSITIVE, Durations.DAY);
        StageReader stageReader = new StageReader(problems, folder);
        Stage stage = stageReader.read(fields);
        List<Traffic> traffic = new TrafficReader(problems, stageReader.poolNames(), stage, lasts).read(fields);
        Roster roster = new Roster(stage);
        CueSchedule schedule = new CueSchedule(problems, roster, List.of(), lasts);
        CueReader cueReader = new CueReader(problems);
        List<Node> cueNodes = fields.list("cues");
        CueReader.refuseNames(cueNodes, problems);
        List<Cue> cues =
                schedule.schedule(cueNodes.stream().map(cueReader::read).toList());
        new CueNotices(problems, lasts).check(schedule.placed());
        stageReader.unusedWeights().check(cues);
        ExpectationResolver resolver = new ExpectationResolver(problems, roster, schedule, cues, traffic, lasts);
        List<Expectation> expectations = resolver.resolve(expectations(fields, problems));
        noticeIdlePools(fields, problems, stage, traffic);
        return stage == null || problems.any()
                ? null
                : new Drill(name, about, stage, traffic, lasts, cues, expectations);
    }

    private static List<ExpectationDraft> expectations(Fields fields, Problems problems) {
        ExpectationReader reader = new ExpectationReader(problems);
        List<ExpectationDraft> drafts = new ArrayList<>();
        List<Node> nodes = fields.list("expect");
        for (Node node : nodes) {
            ExpectationDraft draft = reader.read(node);
            if (draft != null) {
                drafts.add(draft);
            }
        }
        if (nodes.isEmpty() && !fields.odd()) {
            problems.notice(fields.keyPlace("expect"), "the drill expects nothing, so it cannot fail", "add expect:");
        }
        return drafts;
    }

    private static void noticeIdlePools(
            Fields fields, Problems problems, @Nullable Stage stage, List<Traffic> traffic) {
        if (stage != null && !traffic.isEmpty()) {
            stage.pools().stream()
                    .filter(pool ->
                            traffic.stream().noneMatch(stream -> stream.pool().equals(pool.name())))
                    .forEach(pool -> problems.notice(
                            fields.keyPlace("traffic"),
                            "no traffic goes to pool '" + pool.name() + "'",
                            "drop the pool, or send some"));
        }
    }

    private static @Nullable Node tree(String text, Problems problems) {
        if (text.length() > MOST_BYTES) {
            tooLarge(text.length(), problems);
            return null;
        }
        int line = 1;
        int column = 1;
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            if (c < ' ' && c != '\n' && c != '\r' && c != '\t') {
                problems.add(
                        new Place(line, column),
                        "a control character, which no text file holds",
                        "save the drill as plain text");
                return null;
            }
            line += c == '\n' ? 1 : 0;
            column = c == '\n' ? 1 : column + 1;
        }
        return TreeBuilder.build(text, problems);
    }

    private static @Nullable String load(Path file, Problems problems) {
        try {
            if (Files.isDirectory(file)) {
                problems.add(Place.FILE, "this is a folder", "name a drill file in it");
                return null;
            }
            long size = Files.size(file);
            if (size > MOST_BYTES) {
                tooLarge(size, problems);
                return null;
            }
            byte[] bytes;
            try (InputStream in = Files.newInputStream(file)) {
                bytes = in.readNBytes(MOST_BYTES + 1); // a pipe or a device holds more than its size says
            }
            if (bytes.length > MOST_BYTES) {
                tooLarge(bytes.length, problems);
                return null;
            }
            return StandardCharsets.UTF_8
                    .newDecoder()
                    .decode(ByteBuffer.wrap(bytes))
                    .toString();
        } catch (NoSuchFileException e) {
            problems.add(Place.FILE, "there is no such file", "steelyard drills lists the bundled ones");
        } catch (CharacterCodingException e) {
            problems.add(Place.FILE, "the file is not UTF-8", "save the drill as UTF-8 text");
        } catch (IOException e) {
            problems.add(Place.FILE, "the file cannot be read: " + e.getMessage(), "look at its permissions");
        }
        return null;
    }

    private static void tooLarge(long bytes, Problems problems) {
        problems.add(
                Place.FILE,
                "the file holds " + bytes / 1000 + " kB",
                "a drill holds at most " + MOST_BYTES / 1000 + " kB; backends with times: 40 save lines");
    }

    private static <T> Parsed<T> refused(Problems problems) {
        return new Parsed<>(Optional.empty(), problems.inOrder());
    }
}
