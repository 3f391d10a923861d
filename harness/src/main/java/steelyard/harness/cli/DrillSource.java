package steelyard.harness.cli;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Drill;
import steelyard.drills.read.DrillLibrary;
import steelyard.drills.read.DrillPlaces;
import steelyard.drills.read.DrillReader;
import steelyard.drills.read.Parsed;
import steelyard.drills.read.Problem;

/**
 * A drill as it was named on the command line: a file, or else the name of a bundled drill.
 *
 * @param name as it is shown
 * @param stem the file name without its ending, in letters, digits and dashes: for names of folders
 * @param text what was read
 * @param folder where names of files in it begin, or null for a bundled drill
 * @param parsed what that came to
 */
record DrillSource(
        String name, String stem, String text, @Nullable Path folder, Parsed<Drill> parsed) {
    private static final String ENDING = "\\.ya?ml$";

    /**
     * Reads what was named. Problems of the drill are left in {@code parsed}.
     *
     * @throws CommandFailure when there is neither such a file nor such a bundled drill
     */
    static DrillSource named(Path path) throws CommandFailure {
        String name = path.toString();
        String bare = name.replaceFirst(ENDING, "");
        Optional<String> bundled = DrillLibrary.text(bare);
        if (name.isEmpty()) {
            throw CommandFailure.wrong(
                    List.of("steelyard: the name of the drill is empty; name a file, or a bundled drill (`steelyard"
                            + " drills` lists them)"));
        }
        if (!Files.isRegularFile(path) && bundled.isPresent()) {
            return new DrillSource(bare, bare, bundled.get(), null, DrillReader.read(bare, bundled.get()));
        }
        boolean looksBare = path.getNameCount() == 1 && bare.equals(name);
        if (!Files.exists(path) && looksBare) {
            throw CommandFailure.wrong(
                    List.of("steelyard: no file and no bundled drill '" + name + "'; " + remedy(name)));
        }
        Parsed<Drill> parsed = DrillReader.read(path);
        return new DrillSource(
                name,
                stem(path),
                parsed.ok() ? text(path) : "",
                path.toAbsolutePath().getParent(),
                parsed);
    }

    private static String remedy(String name) {
        return DrillLibrary.nearest(name)
                .map(near -> "did you mean '" + near + "'?")
                .orElse("`steelyard drills` lists the bundled ones");
    }

    /** Lines about the problems and notices, in the order of the file. */
    List<String> lines() {
        return parsed.problems().stream().map(Object::toString).toList();
    }

    /**
     * The drill, its folders of answers read once.
     *
     * @throws CommandFailure with every problem, when there is none or a folder of answers cannot be used
     */
    Drill drill() throws CommandFailure {
        Optional<Drill> drill = parsed.value();
        if (drill.isEmpty()) {
            throw CommandFailure.wrong(lines());
        }
        List<Problem> answers = Playable.answers(drill.get(), places());
        if (!answers.isEmpty()) {
            throw CommandFailure.wrong(answers.stream().map(Object::toString).toList());
        }
        return drill.get();
    }

    /** Where the keys of the drill stand. */
    DrillPlaces places() {
        return DrillPlaces.of(name, text);
    }

    private static String stem(Path path) {
        Path file = path.toAbsolutePath().normalize().getFileName();
        String stem = String.valueOf(file)
                .replaceFirst(ENDING, "")
                .toLowerCase(Locale.ROOT)
                .replaceAll("[^a-z0-9]+", "-")
                .replaceAll("^-+|-+$", "");
        return stem.isEmpty() ? "drill" : stem;
    }

    private static String text(Path path) throws CommandFailure {
        try {
            return Files.readString(path);
        } catch (IOException changed) {
            throw CommandFailure.cannot(
                    "steelyard: " + path + " could be read once but not twice; run it again", changed);
        }
    }
}
