package steelyard.cli;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;

/** The command in a process of its own, as the launcher starts it. */
final class Command {
    private static final long LONGEST_SECONDS = 120;

    private final Path folder;
    private final Process process;

    /** @param folder the working directory; what the process writes is kept there too */
    private Command(Path folder, Process process) {
        this.folder = folder;
        this.process = process;
    }

    /** Starts it, with the default action for every signal, whatever the parent of this process had set. */
    static Command start(Path folder, String... arguments) throws IOException {
        List<String> line = new ArrayList<>(List.of(
                "env",
                "--default-signal",
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-XX:+UseSerialGC",
                "-cp",
                System.getProperty("java.class.path"),
                "steelyard.harness.cli.Main"));
        line.addAll(List.of(arguments));
        Process process = new ProcessBuilder(line)
                .directory(folder.toFile())
                .redirectInput(ProcessBuilder.Redirect.from(Path.of("/dev/null").toFile()))
                .redirectOutput(folder.resolve("stdout").toFile())
                .redirectError(folder.resolve("stderr").toFile())
                .start();
        return new Command(folder, process);
    }

    /** Sends it a signal: {@code INT}. */
    void signal(String name) throws IOException, InterruptedException {
        new ProcessBuilder("kill", "-" + name, String.valueOf(process.pid()))
                .start()
                .waitFor();
    }

    /** Waits for its end; the exit status. */
    int status() throws InterruptedException {
        if (!process.waitFor(LONGEST_SECONDS, TimeUnit.SECONDS)) {
            process.destroyForcibly();
            throw new IllegalStateException("the command did not end");
        }
        return process.exitValue();
    }

    boolean running() {
        return process.isAlive();
    }

    String out() throws IOException {
        return Files.readString(folder.resolve("stdout"));
    }

    String err() throws IOException {
        return Files.readString(folder.resolve("stderr"));
    }
}
