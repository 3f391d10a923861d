package steelyard.backends.fleet;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;

import java.io.IOException;
import java.net.ConnectException;
import java.net.InetSocketAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.TimeUnit;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.ServiceTime;
import steelyard.backends.stub.BackendListener;

class EmbeddedFleetTest {

    private static final BackendListener DEAF = new BackendListener() {
        @Override
        public void received(int backend, long request, int attempt, long atNanos) {}

        @Override
        public void ended(int backend, long request, int attempt, boolean inFull, int status, long atNanos) {}
    };

    @Test
    void start_manyOnTwoLoops_eachHasAPortAndLifeOfItsOwn() throws Exception {
        List<InetSocketAddress> addresses;
        try (EmbeddedFleet fleet = new EmbeddedFleet(2)) {
            fleet.start(specs(20), 1, System::nanoTime, DEAF);
            addresses = IntStream.range(0, 20).mapToObj(fleet::address).toList();
            assertThat(new HashSet<>(addresses)).hasSize(20);
            fleet.apply(7, new Change.Kill()).get(20, TimeUnit.SECONDS);
            for (int backend = 0; backend < 20; backend++) {
                assertThat(accepts(addresses.get(backend))).isEqualTo(backend != 7);
            }
            assertThat(fleet.figures(0).get(20, TimeUnit.SECONDS).received()).isZero();
        }
        assertThat(addresses).noneMatch(EmbeddedFleetTest::accepts);
    }

    @Test
    void start_twice_isRefused() throws Exception {
        try (EmbeddedFleet fleet = new EmbeddedFleet()) {
            fleet.start(specs(1), 1, System::nanoTime, DEAF);
            assertThatIllegalStateException().isThrownBy(() -> fleet.start(specs(1), 1, System::nanoTime, DEAF));
        }
    }

    @Test
    void apply_afterClose_fails() throws Exception {
        EmbeddedFleet fleet = new EmbeddedFleet();
        fleet.start(specs(1), 1, System::nanoTime, DEAF);
        fleet.close();
        assertThat(fleet.apply(0, new Change.Kill())).failsWithin(Duration.ofSeconds(20));
    }

    @Test
    void ports_belowTheEphemeralRangeAndNeverTwice() throws Exception {
        Set<Integer> ports = new HashSet<>();
        for (int i = 0; i < 200; i++) {
            ports.add(Ports.ofThisProcess().next());
        }
        assertThat(ports).hasSize(200).allMatch(port -> port >= 10_000 && port < 32_000);
    }

    @Test
    void ports_rangeFile_setsTheUpperEnd(@TempDir Path folder) throws Exception {
        Path file = Files.writeString(folder.resolve("range"), "15000\t60999\n");
        for (int salt = 0; salt < 50; salt++) {
            assertThat(Ports.of(file, salt).next()).isBetween(10_000, 14_999);
            assertThat(Ports.of(folder.resolve("none"), salt).next()).isBetween(20_000, 31_999);
        }
    }

    @Test
    void ports_noneFree_saysWhatToDo() throws Exception {
        try (ServerSocket busy = new ServerSocket()) {
            int port = Ports.ofThisProcess().next();
            busy.bind(new InetSocketAddress("127.0.0.1", port));
            assertThatExceptionOfType(CannotStart.class)
                    .isThrownBy(() -> new Ports(port, port + 1, 0).next())
                    .withMessageContaining("no free port from " + port);
        }
    }

    private static List<BackendSpec> specs(int count) {
        BehaviourSettings settings = BehaviourSettings.of(1, 0, new ServiceTime.Fixed(0));
        return IntStream.range(0, count)
                .mapToObj(i -> new BackendSpec("fulmar-" + i, settings, "/afloat", null))
                .toList();
    }

    private static boolean accepts(InetSocketAddress address) {
        try (Socket socket = new Socket()) {
            socket.connect(address, 20_000);
            return true;
        } catch (ConnectException refused) {
            return false;
        } catch (IOException other) {
            throw new AssertionError(other);
        }
    }
}
