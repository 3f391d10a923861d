package steelyard.balancer.live.http;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import java.util.SplittableRandom;
import java.util.TreeSet;
import java.util.concurrent.Callable;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import steelyard.balancer.live.Leaks;

/**
 * A million requests by the grammar, three in five of them spoilt, through the handlers of both sides. What reaches a
 * backend has to be what a second, strict reading of the same octets finds, in the same order; what that reading refuses
 * must not reach it; a valid request must; nothing may be left in flight or unreleased.
 */
@Timeout(600)
class HeadFuzzTest {
    static {
        Leaks.watch();
    }

    private static final int HEADS = 1_000_000;
    private static final int WORKERS = 2;
    private static final long SEED = 20_261_201L;

    private static final byte[] REST = StrictRequest.octets("x\r\n\r\n\r\n");

    /** For one connection only, ours, or changed on the way by rule. */
    private static final Set<String> NOT_COMPARED = Set.of(
            "connection",
            "keep-alive",
            "proxy-connection",
            "te",
            "upgrade",
            "trailer",
            "transfer-encoding",
            "content-length",
            "host",
            "max-forwards",
            "expect",
            "steelyard-request",
            "steelyard-attempt");

    @Test
    void heads_aMillion_arePassedOnAsTheyWereReadOrNotAtAll() throws Exception {
        ExecutorService workers = Executors.newFixedThreadPool(WORKERS);
        List<Future<Tally>> running = new ArrayList<>();
        for (int worker = 0; worker < WORKERS; worker++) {
            long seed = SEED + worker;
            Callable<Tally> part = () -> new Worker(seed).run(HEADS / WORKERS);
            running.add(workers.submit(part));
        }
        Tally all = new Tally();
        for (Future<Tally> each : running) {
            all.add(each.get());
        }
        workers.shutdown();
        assertThat(workers.awaitTermination(20, TimeUnit.SECONDS)).isTrue();
        Leaks.check();
        assertThat(all.inFlight).isZero();
        assertThat(all.passedOn).as("passed on").isGreaterThan(HEADS / 3);
        assertThat(all.refused).as("refused").isGreaterThan(HEADS / 5);
    }

    private static final class Tally {
        private long passedOn;
        private long refused;
        private int inFlight;

        void add(Tally other) {
            passedOn += other.passedOn;
            refused += other.refused;
            inFlight += other.inFlight;
        }
    }

    private static final class Worker {
        private final long seed;
        private final SplittableRandom random;
        private final RequestGrammar grammar;
        private final EmbeddedBalancer balancer = new EmbeddedBalancer();
        private final Tally tally = new Tally();

        Worker(long seed) {
            this.seed = seed;
            this.random = new SplittableRandom(seed);
            this.grammar = new RequestGrammar(random);
        }

        Tally run(int heads) {
            for (int head = 0; head < heads; head++) {
                boolean valid = random.nextInt(5) < 2;
                String request = valid ? grammar.valid() : grammar.spoilt(grammar.valid());
                try {
                    play(request, valid);
                } catch (AssertionError | RuntimeException failure) {
                    throw new AssertionError("seed " + seed + ", head " + head + ": " + shown(request), failure);
                }
            }
            tally.inFlight = balancer.close();
            return tally;
        }

        private void play(String request, boolean valid) {
            byte[] octets = StrictRequest.octets(request);
            int cut = random.nextInt(octets.length + 1);
            balancer.send(octets, 0, cut);
            balancer.send(octets, cut, octets.length);
            balancer.answerAll();
            StrictRequest.Reading read = StrictRequest.read(request);
            if (read.end() == StrictRequest.End.FAULTY) {
                balancer.send(REST, 0, REST.length); // a fault is told at the latest at the end of its head or chunk
            }
            List<StrictRequest> passed = passedOn(balancer.sent());
            int answers = count(balancer.answers(), "HTTP/1.1 ");
            int own = answers - count(balancer.answers(), "HTTP/1.1 200 OK\r\nContent-Length: 0\r\n");
            compare(read.requests(), passed);
            if (valid) {
                assertThat(passed).as("a valid request is passed on").hasSize(1);
                assertThat(answers).isEqualTo(1);
            }
            boolean lacks = read.end() == StrictRequest.End.FAULTY
                    || passed.size() < read.requests().size();
            if (lacks && read.requests().stream().noneMatch(Worker::isLast)) {
                assertThat(own).as("answers of our own").isPositive();
            }
            tally.passedOn += passed.size();
            tally.refused += own;
            if (balancer.clientOpen() && read.end() == StrictRequest.End.WHOLE && own == 0) {
                balancer.forget();
            } else {
                balancer.next();
            }
        }

        /** Behind it nothing is served, and nothing said about what comes. */
        private static boolean isLast(StrictRequest request) {
            return request.old()
                    || StrictRequest.values(request.fields(), "connection").stream()
                            .anyMatch(list -> list.toLowerCase(Locale.ROOT).contains("close"));
        }

        /** A connection that was given up inside a request may end open, never faulty. */
        private static List<StrictRequest> passedOn(List<String> connections) {
            List<StrictRequest> passed = new ArrayList<>();
            for (String sent : connections) {
                StrictRequest.Reading reading = StrictRequest.read(sent);
                assertThat(reading.end())
                        .as("what a backend got: %s", shown(sent))
                        .isNotEqualTo(StrictRequest.End.FAULTY);
                passed.addAll(reading.requests());
            }
            return passed;
        }

        private static void compare(List<StrictRequest> read, List<StrictRequest> passed) {
            assertThat(passed.size()).as("no more than were read").isLessThanOrEqualTo(read.size());
            int next = 0;
            for (StrictRequest each : passed) {
                while (next < read.size() && !same(read.get(next), each)) {
                    next++; // answered here, such as OPTIONS with Max-Forwards 0
                }
                assertThat(next).as("passed on, but not so read: %s", each).isLessThan(read.size());
                next++;
            }
        }

        private static boolean same(StrictRequest read, StrictRequest passed) {
            return read.method().equals(passed.method())
                    && (read.target().equals(passed.target())
                            || read.target().endsWith(passed.target())
                            || read.target().matches("(?i)http://.*"))
                    && read.content().equals(passed.content())
                    && StrictRequest.values(passed.fields(), "host").size() == 1
                    && compared(read, read, false).equals(compared(passed, read, true));
        }

        /** The fields that have to arrive as they were, in order. */
        private static List<String> compared(StrictRequest of, StrictRequest read, boolean passed) {
            Set<String> named = new TreeSet<>();
            for (String list : StrictRequest.values(read.fields(), "connection")) {
                for (String option : list.split(",", -1)) {
                    named.add(option.strip().toLowerCase(Locale.ROOT));
                }
            }
            List<String> compared = new ArrayList<>();
            for (String[] field : of.fields()) {
                String name = field[0].toLowerCase(Locale.ROOT);
                boolean own = passed && name.equals("via") && field[1].endsWith(" steelyard");
                if (!own && !NOT_COMPARED.contains(name) && !named.contains(name)) {
                    compared.add(field[0] + ": " + field[1]);
                }
            }
            return compared;
        }

        private static int count(String text, String part) {
            int count = 0;
            for (int at = text.indexOf(part); at >= 0; at = text.indexOf(part, at + 1)) {
                count++;
            }
            return count;
        }

        private static String shown(String octets) {
            StringBuilder shown = new StringBuilder();
            octets.chars().forEach(c -> shown.append(c < ' ' || c > '~' ? String.format("\\x%02x", c) : (char) c));
            return shown.toString();
        }
    }
}
