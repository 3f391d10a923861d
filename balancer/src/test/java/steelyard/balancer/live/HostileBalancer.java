package steelyard.balancer.live;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStreamReader;
import java.io.PrintStream;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.TimeUnit;

/**
 * A balancer with one backend in a process of its own and little memory. The process says its front's port, then answers
 * each line that it is sent with what is in flight and how many sockets it has open; at the end of its input it closes
 * everything, accounts for it and exits.
 */
final class HostileBalancer implements AutoCloseable {
    private static final long LONGEST_SECONDS = 60;

    private final Process process;
    private final BufferedReader from;
    private final PrintStream to;
    private final InetSocketAddress front;

    private HostileBalancer(Process process) throws IOException {
        this.process = process;
        this.from = process.inputReader(StandardCharsets.US_ASCII);
        this.to = new PrintStream(process.getOutputStream(), true, StandardCharsets.US_ASCII);
        this.front = new InetSocketAddress(InetAddress.getLoopbackAddress(), Integer.parseInt(line()));
    }

    static HostileBalancer start() throws IOException {
        List<String> command = List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-Xmx160m",
                "-XX:MaxDirectMemorySize=96m",
                "-XX:+UseSerialGC",
                "-XX:+ExitOnOutOfMemoryError",
                "-cp",
                System.getProperty("java.class.path"),
                HostileBalancer.class.getName());
        return new HostileBalancer(new ProcessBuilder(command)
                .redirectError(ProcessBuilder.Redirect.INHERIT)
                .start());
    }

    InetSocketAddress front() {
        return front;
    }

    /** Attempts in flight, and open sockets of the process. */
    int[] standing() throws IOException {
        to.println("?");
        String[] figures = line().split(" ");
        return new int[] {Integer.parseInt(figures[0]), Integer.parseInt(figures[1])};
    }

    private String line() throws IOException {
        String line = from.readLine();
        if (line == null) {
            throw new IOException("the balancer's process ended");
        }
        return line;
    }

    /** Lets the process close and account; its exit status is 0 when nothing was left. */
    int end() throws InterruptedException {
        to.close();
        return process.waitFor(LONGEST_SECONDS, TimeUnit.SECONDS) ? process.exitValue() : -1;
    }

    @Override
    public void close() {
        process.destroyForcibly();
    }

    private static void answerWhole(Wire wire) throws IOException {
        while (Message.request(wire) != null) {
            wire.send(Duties.OK);
        }
    }

    /** The process itself. */
    public static void main(String[] none) throws Exception {
        BufferedReader in = new BufferedReader(new InputStreamReader(System.in, StandardCharsets.US_ASCII));
        PrintStream out = new PrintStream(System.out, true, StandardCharsets.US_ASCII);
        try (FakeBackend backend = FakeBackend.playing(HostileBalancer::answerWhole);
                LivePlay play = LivePlay.of(
                        pool -> pool.patience(10, 30, 60).clientsWithin(2, 2).limited(8000, 32_768, 1 << 20),
                        backend.address())) {
            out.println(play.front().getPort());
            while (in.readLine() != null) {
                out.println(play.inFlight() + " " + Accounting.sockets());
            }
        }
        for (int i = 0; i < 200 && Accounting.sockets() > 0; i++) {
            TimeUnit.MILLISECONDS.sleep(100);
        }
        System.exit(Accounting.sockets() == 0 ? 0 : 1);
    }
}
