package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.function.Consumer;
import java.util.function.Function;
import java.util.function.UnaryOperator;
import org.jspecify.annotations.Nullable;

/**
 * Asks one request, followed at once by a harmless second one on the same connection: if the first was framed in
 * another way than meant, the second is answered wrongly or the backend sees something else. Everything is done twice,
 * with the octets in one go and one a segment, and has to come out the same.
 */
final class Duties {
    static final String OK = "HTTP/1.1 200 OK\r\nContent-Length: 2\r\n\r\nok";
    static final String HARMLESS = "GET /harmless HTTP/1.1\r\nHost: a\r\nConnection: close\r\n\r\n";
    private static final String HARMLESS_ANSWER = "HTTP/1.1 200 OK\r\nContent-Length: 8\r\n\r\nharmless";
    private static final int MOST_SLOWLY = 3000;

    private UnaryOperator<Pool> pool = UnaryOperator.identity();
    private Function<Message, @Nullable String> rule = request -> OK;
    private boolean aborts;

    /** What both ends saw, without what belongs to the harmless request. */
    record Seen(List<Message> interim, List<Message> answers, List<Message> requests, boolean harmless) {
        /** The one final answer to the first request. */
        Message answer() {
            assertThat(answers).hasSize(1);
            return answers.get(0);
        }

        /** The one request that reached the backend. */
        Message request() {
            assertThat(requests).hasSize(1);
            return requests.get(0);
        }
    }

    static Duties of() {
        return new Duties();
    }

    Duties with(UnaryOperator<Pool> settings) {
        pool = settings;
        return this;
    }

    /** The backend may see the head of a request whose content turns out to be faulty, but never the whole. */
    Duties aborting() {
        aborts = true;
        return this;
    }

    /** The backend closes without an answer. */
    Duties closing() {
        rule = request -> null;
        return this;
    }

    /** The octets with which the backend answers the first request. */
    Duties answering(String octets) {
        rule = request -> octets;
        return this;
    }

    void ask(String request, Consumer<Seen> check) throws Exception {
        check.accept(once(request, false));
        if (request.length() <= MOST_SLOWLY) {
            check.accept(once(request, true));
        }
    }

    /** One answer of one of these statuses, nothing whole for the backend, and the connection closes. */
    void refuses(String request, Integer... statuses) throws Exception {
        ask(request, seen -> {
            assertThat(seen.answer().status()).as(request).isIn(Arrays.asList(statuses));
            assertThat(seen.answer().value("connection")).isEqualToIgnoringCase("close");
            assertThat(seen.requests()).as("forwarded of %s", request).isEmpty();
            assertThat(seen.harmless()).as("served behind %s", request).isFalse();
        });
    }

    private Seen once(String request, boolean slowly) throws Exception {
        try (KeepingBackend backend = new KeepingBackend(this::answer);
                LivePlay play = LivePlay.of(pool, backend.address());
                Wire client = play.client()) {
            send(client, request + HARMLESS, slowly);
            List<Message> interim = new ArrayList<>();
            List<Message> answers = new ArrayList<>();
            boolean harmless = read(client, request.startsWith("HEAD "), interim, answers);
            if (!aborts) {
                assertThat(backend.failure())
                        .as("what the backend could not read")
                        .isNull();
            }
            List<Message> requests = new ArrayList<>(backend.requests());
            boolean reached = requests.removeIf(Duties::harmless);
            assertThat(reached).as("the harmless request reached the backend").isEqualTo(harmless);
            assertThat(play.inFlight()).isZero();
            return new Seen(interim, answers, requests, harmless);
        }
    }

    private @Nullable String answer(Message request) {
        return harmless(request) ? HARMLESS_ANSWER : rule.apply(request);
    }

    private static boolean harmless(Message request) {
        return request.target().equals("/harmless");
    }

    /** A refused client may be told so before it sent everything; what it still sends may then fail. */
    private static void send(Wire client, String octets, boolean slowly) {
        try {
            if (slowly) {
                client.sendSlowly(octets);
            } else {
                client.send(octets);
            }
        } catch (IOException closed) {
            client.failure(closed);
        }
    }

    private static boolean read(Wire client, boolean toHead, List<Message> interim, List<Message> answers)
            throws IOException {
        boolean harmless = false;
        while (true) {
            Message answer = Message.answer(client, toHead && answers.isEmpty());
            if (answer == null) {
                return harmless;
            }
            assertThat(harmless).as("an answer behind the last one: %s", answer).isFalse();
            if (answer.status() < 200) {
                interim.add(answer);
            } else if (answer.content().equals("harmless")) {
                harmless = true;
            } else {
                answers.add(answer);
            }
        }
    }
}
