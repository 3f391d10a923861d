package steelyard.backends.stub;

import io.netty.channel.EventLoop;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.util.collection.LongObjectHashMap;
import io.netty.util.collection.LongObjectMap;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.function.LongSupplier;
import steelyard.backends.behave.Behaviour;
import steelyard.backends.behave.Chance;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;
import steelyard.backends.behave.Reply;
import steelyard.backends.behave.ReplySink;
import steelyard.backends.stub.Exchange.Kind;

/**
 * Drives a behaviour from one event loop and carries out its plans: requests in, replies out, one timer for the next
 * deadline. Decides nothing itself. On the stub's event loop only.
 */
final class PlanRunner implements ReplySink {

    private final StubSettings settings;
    private final LongSupplier clock;
    private final BackendListener listener;
    private final Reception reception;
    private final AnswerMaker answers;
    private final Behaviour behaviour;
    private final Replies replies;
    private final Door door;
    private final DeadlineTimer timer;
    private final Set<Connection> connections = new LinkedHashSet<>();
    private final LongObjectMap<Exchange> held = new LongObjectHashMap<>();

    private long bodyBytes;
    private long tunnelled;
    private int tunnels;

    PlanRunner(StubSettings settings, EventLoop loop, LongSupplier clock, BackendListener listener, DoorMaker doors) {
        this.settings = settings;
        this.clock = clock;
        this.listener = listener;
        Chance chance = new Chance(settings.seed());
        this.behaviour = new Behaviour(settings.backend(), settings.behaviour(), chance, clock.getAsLong());
        this.replies = new Replies(settings.behaviour().bodyBytes());
        this.reception = new Reception(settings);
        this.answers = new AnswerMaker(settings.answers(), chance, replies);
        this.door = doors.make(this);
        this.timer = new DeadlineTimer(loop, clock, this::onDeadline);
    }

    /** Makes the door through which connections of this runner come. */
    interface DoorMaker {
        Door make(PlanRunner runner);
    }

    Door door() {
        return door;
    }

    Replies replies() {
        return replies;
    }

    boolean hanging() {
        return behaviour.hanging();
    }

    boolean listening() {
        return behaviour.listening();
    }

    long now() {
        return clock.getAsLong();
    }

    void opened(Connection connection) {
        connections.add(connection);
    }

    void closed(Connection connection) {
        connections.remove(connection);
    }

    /** The head of a request was read. */
    Exchange begin(Connection connection, HttpRequest head) {
        Exchange exchange = reception.begin(connection, head);
        if (exchange.kind == Kind.REQUEST) {
            listener.received(settings.backend(), exchange.request, exchange.attempt, clock.getAsLong());
        }
        return exchange;
    }

    /** A message that is no HTTP request: it is answered, but is neither traffic nor a probe. */
    Exchange malformed(Connection connection) {
        return reception.malformed(connection);
    }

    /** A request was read to its end. */
    void arrive(Exchange exchange, byte[] body) {
        held.put(exchange.token, exchange);
        switch (exchange.kind) {
            case PROBE -> behaviour.probe(exchange.token, exchange.request, clock.getAsLong(), this);
            case READING -> behaviour.read(exchange.token, exchange.request, clock.getAsLong(), this);
            case REQUEST -> {
                long extraNanos = answers.find(exchange, body);
                exchange.place = behaviour.arrive(
                        exchange.token, exchange.request, exchange.attempt, extraNanos, clock.getAsLong(), this);
            }
        }
        arm();
    }

    void countBody(int bytes) {
        bodyBytes += bytes;
    }

    long bodyBytes() {
        return bodyBytes;
    }

    /** A connection was upgraded. */
    void tunnelOpened() {
        tunnelled++;
        tunnels++;
    }

    void tunnelClosed() {
        tunnels--;
    }

    /** The connection of an exchange closed before its reply had gone. */
    void abandon(Exchange exchange) {
        long now = clock.getAsLong();
        behaviour.abandon(exchange.place, exchange.token, now, this);
        held.remove(exchange.token);
        end(exchange, false, 0, now);
        arm();
    }

    /** The reply of an exchange was handed to the socket, or could not be. */
    void sent(Exchange exchange, boolean inFull) {
        end(exchange, inFull, exchange.status, clock.getAsLong());
    }

    /** Tells the listener once that a request is over. */
    void end(Exchange exchange, boolean inFull, int status, long atNanos) {
        if (!exchange.over) {
            exchange.over = true;
            if (exchange.kind == Kind.REQUEST) {
                listener.ended(settings.backend(), exchange.request, exchange.attempt, inFull, status, atNanos);
            }
        }
    }

    /** @return when it was applied */
    long apply(Change change) {
        long now = clock.getAsLong();
        behaviour.apply(change, now, this);
        arm();
        return now;
    }

    Figures figures() {
        Figures figures = behaviour.figures(clock.getAsLong(), this).withTunnels(tunnelled, tunnels);
        arm();
        return figures;
    }

    /** Stops everything; what is open ends as abandoned. Returns the connections, to be waited for. */
    List<Connection> stop() {
        door.close();
        timer.cancel();
        return new ArrayList<>(connections);
    }

    @Override
    public void reply(long token, long request, int attempt, Reply reply, int status, int plannedBytes, long atNanos) {
        finish(token, reply, status);
    }

    @Override
    public void probeReply(long token, long probe, Reply reply, int status, long atNanos) {
        finish(token, reply, status);
    }

    @Override
    public void readingReply(
            long token, long reading, Reply reply, int status, Map<String, Double> gauges, long atNanos) {
        Exchange exchange = held.get(token);
        if (exchange != null && reply == Reply.ANSWER) {
            held.remove(token);
            exchange.connection.reply(exchange, answers.loadPage(gauges, exchange.headOnly));
        } else {
            finish(token, reply, status);
        }
    }

    @Override
    public void listening(boolean open, long atNanos) {
        if (open) {
            door.open();
        } else {
            door.shut();
        }
    }

    @Override
    public void connectionsReset(long atNanos) {
        List<Connection> all = new ArrayList<>(connections);
        connections.clear();
        all.forEach(connection -> connection.reset(atNanos));
        held.clear();
    }

    private void finish(long token, Reply reply, int status) {
        Exchange exchange = held.remove(token);
        if (exchange == null) {
            // Abandoned before.
            return;
        }
        switch (reply) {
            case ANSWER -> exchange.connection.reply(exchange, answers.answer(exchange, status));
            case TURNED_AWAY, FAULT ->
                exchange.connection.reply(exchange, replies.shortText(status, exchange.headOnly));
            case SILENCE, LOST, DROPPED -> {
                // Nothing is sent. A lost one ends with the reset of its connection, which follows.
            }
        }
    }

    private void arm() {
        if (behaviour.hasDeadline()) {
            timer.arm(behaviour.nextDeadlineNanos());
        }
    }

    private void onDeadline() {
        behaviour.poll(clock.getAsLong(), this);
        arm();
    }
}
