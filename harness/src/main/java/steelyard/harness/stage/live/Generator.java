package steelyard.harness.stage.live;

import io.netty.bootstrap.Bootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelOption;
import io.netty.channel.EventLoop;
import io.netty.channel.epoll.EpollSocketChannel;
import io.netty.channel.group.ChannelGroup;
import io.netty.channel.group.DefaultChannelGroup;
import io.netty.channel.socket.SocketChannel;
import io.netty.channel.socket.nio.NioSocketChannel;
import io.netty.handler.codec.http.HttpClientCodec;
import io.netty.util.concurrent.Future;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.TimeUnit;
import org.jspecify.annotations.Nullable;
import steelyard.backends.stub.Transport;
import steelyard.balancer.core.decide.Outcome;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Traffic;
import steelyard.harness.record.PlayListener;
import steelyard.harness.stage.Clientele;

/**
 * The open-loop side of a play: sends each request when it is told to, whatever is still open, and tells what becomes of
 * it.
 *
 * <p>A client keeps as many connections as it needs at once, takes the one used last, and closes what was idle for a set
 * time: half of the balancer's own idle limit at most, so that the balancer never closes a connection just as it is
 * taken up again, and whatever breaks off is a true failure.
 *
 * <p>Lives on one event loop; everything but the constructor is called there.
 */
final class Generator implements ClientConnection.Owner {
    private static final int SWITCHING = 101;
    private static final long SWEEP_NANOS = TimeUnit.MILLISECONDS.toNanos(250);

    private final EventLoop loop;
    private final PlayClock clock;
    private final Account account;
    private final BrokenOff brokenOff;
    private final Bootstrap bootstrap;
    private final Clients[] streams;
    private final GiveUps giveUps;
    private final ChannelGroup channels;
    private final Set<Exchange> tunnels = new HashSet<>();
    private final int mostConnections;
    private int connections;
    private int open;
    private boolean keeping = true;
    private boolean closing;

    /** How the balancer broke off a request, if it did. Asking makes it forget. */
    @FunctionalInterface
    interface BrokenOff {
        @Nullable
        Outcome take(long request);
    }

    /**
     * @param ways where each traffic stream goes, by its number
     * @param mostConnections of all clients together
     * @param brokenOff asked about every request that has ended
     */
    Generator(
            EventLoop loop,
            Transport transport,
            PlayClock clock,
            Account account,
            List<Traffic> traffic,
            List<Way> ways,
            ClientAddresses addresses,
            int mostConnections,
            BrokenOff brokenOff) {
        this.loop = loop;
        this.clock = clock;
        this.account = account;
        this.brokenOff = brokenOff;
        this.mostConnections = mostConnections;
        this.giveUps = new GiveUps(traffic.size());
        this.channels = new DefaultChannelGroup(loop);
        this.streams = new Clients[traffic.size()];
        Clientele clientele = new Clientele(traffic);
        for (int i = 0; i < streams.length; i++) {
            streams[i] = new Clients(clientele, i, traffic.get(i), ways.get(i), addresses, clock::nanos);
        }
        this.bootstrap = new Bootstrap()
                .group(loop)
                .channel(transport == Transport.EPOLL ? EpollSocketChannel.class : NioSocketChannel.class)
                .option(ChannelOption.TCP_NODELAY, true);
        loop.schedule(this::sweep, SWEEP_NANOS, TimeUnit.NANOSECONDS);
    }

    /** Requests that have no end yet. */
    int open() {
        return open;
    }

    /** When the next client gives up; {@link Long#MAX_VALUE} when none waits. */
    long nextGiveUpNanos() {
        return giveUps.nextNanos();
    }

    /** Lets every client give up that has waited long enough by {@code nowNanos}. */
    void giveUp(long nowNanos) {
        giveUps.expire(nowNanos, this::giveUp);
    }

    /** Drops every open request without telling of an end: what an interruption cuts off has not failed. */
    void drop() {
        giveUps.expire(Long.MAX_VALUE, this::drop);
        List.copyOf(tunnels).forEach(this::drop);
    }

    /** Sends a request; parameters as of {@link steelyard.harness.stage.Hands#send}. */
    void send(long request, long dueNanos, int traffic, int kind, int client) {
        account.tell(Account.Source.TRAFFIC, dueNanos, (to, at) -> to.requestDue(at, request, traffic, kind, client));
        Clients stream = streams[traffic];
        Exchange exchange = stream.exchange(request, dueNanos, traffic, kind);
        open++;
        giveUps.add(exchange);
        Client sender = stream.client(client);
        ClientConnection idle = sender.takeIdle();
        if (idle != null) {
            send(exchange, idle);
        } else if (connections < mostConnections) {
            connect(exchange, sender, stream.way());
        } else {
            account.tell(Account.Source.TRAFFIC, clock.playNow(), (to, at) -> to.connectionCapHit(at));
            end(exchange, Cause.GAVE_UP, 0);
        }
    }

    private void connect(Exchange exchange, Client sender, Way way) {
        connections++;
        ChannelFuture connecting = bootstrap
                .clone()
                .handler(new ChannelInitializer<SocketChannel>() {
                    @Override
                    protected void initChannel(SocketChannel channel) {
                        channels.add(channel);
                        channel.pipeline().addLast(new HttpClientCodec());
                        channel.pipeline().addLast(new ClientConnection(Generator.this, sender, channel));
                        way.secure(channel);
                    }
                })
                .connect(way.front(), sender.from());
        Channel channel = connecting.channel();
        channel.closeFuture().addListener(closed -> connections--);
        connecting.addListener(done -> {
            if (done.isSuccess()) {
                send(exchange, channel.pipeline().get(ClientConnection.class));
            } else {
                end(exchange, Cause.REFUSED, 0);
            }
        });
    }

    private void send(Exchange exchange, ClientConnection connection) {
        if (exchange.hasEnded()) {
            kept(connection);
            return;
        }
        exchange.sentOn(connection);
        account.tell(
                Account.Source.TRAFFIC,
                clock.playNow(),
                (to, at) -> to.requestSent(at, exchange.request, exchange.dueNanos));
        connection.send(exchange, streams[exchange.traffic].message(exchange, connection.client()));
    }

    private void giveUp(Exchange exchange) {
        if (exchange.tunnel()) {
            return;
        }
        end(exchange, Cause.GAVE_UP, 0);
        leave(exchange);
    }

    private void drop(Exchange exchange) {
        if (exchange.end()) {
            open--;
            tunnels.remove(exchange);
            leave(exchange);
        }
    }

    private static void leave(Exchange exchange) {
        ClientConnection connection = exchange.connection();
        if (connection != null) {
            connection.abandon();
        }
    }

    @Override
    public void answered(ClientConnection connection, Exchange exchange, int status, @Nullable String proxyStatus) {
        kept(connection);
        boolean late = clock.playNow() >= exchange.deadlineNanos;
        end(exchange, late ? Cause.GAVE_UP : Answer.cause(status, exchange.asks.good(), proxyStatus), status);
    }

    @Override
    public void brokeOff(ClientConnection connection, Exchange exchange, int status) {
        end(exchange, Answer.cutShort(brokenOff.take(exchange.request)), status);
    }

    @Override
    public void upgraded(ClientConnection connection, Exchange exchange) {
        exchange.tunnelOpened(clock.playNow());
        tunnels.add(exchange);
        loop.schedule(() -> finish(connection, exchange), exchange.asks.openNanos(), TimeUnit.NANOSECONDS);
    }

    /** The other end gets as long as an answer to close its side too. */
    private void finish(ClientConnection connection, Exchange exchange) {
        if (!exchange.hasEnded()) {
            connection.finish();
            long patience = exchange.deadlineNanos - exchange.dueNanos;
            loop.schedule(() -> tooLong(exchange), patience, TimeUnit.NANOSECONDS);
        }
    }

    private void tooLong(Exchange exchange) {
        if (!exchange.hasEnded()) {
            tunnels.remove(exchange);
            end(exchange, Cause.GAVE_UP, SWITCHING);
            leave(exchange);
        }
    }

    @Override
    public void tunnelEnded(ClientConnection connection, Exchange exchange, boolean orderly) {
        tunnels.remove(exchange);
        end(exchange, orderly ? null : Answer.cutShort(brokenOff.take(exchange.request)), SWITCHING);
    }

    /** Closes what is idle now and from here on, and by that ends the units of work that are connections. */
    void closeIdle() {
        keeping = false;
        for (Clients stream : streams) {
            stream.closeIdle(Long.MAX_VALUE);
        }
    }

    @Override
    public void closed(ClientConnection connection) {
        connection.client().forget(connection);
    }

    private void kept(ClientConnection connection) {
        if (!connection.usable()) {
            return;
        }
        if (keeping) {
            connection.client().keep(connection, clock.nanos());
        } else {
            connection.close();
        }
    }

    private void end(Exchange exchange, @Nullable Cause cause, int status) {
        if (!exchange.end()) {
            return;
        }
        open--;
        brokenOff.take(exchange.request);
        account.tell(Account.Source.TRAFFIC, clock.playNow(), (to, at) -> tell(exchange, cause, status, to, at));
    }

    private static void tell(Exchange exchange, @Nullable Cause cause, int status, PlayListener to, long at) {
        long request = exchange.request;
        long due = exchange.dueNanos;
        if (exchange.tunnel()) {
            to.tunnelEnded(at, exchange.openedNanos(), request, due, exchange.traffic, exchange.kind, cause, status);
        } else {
            to.requestEnded(at, request, due, exchange.traffic, exchange.kind, cause, status);
        }
    }

    private void sweep() {
        if (closing) {
            return;
        }
        long now = clock.nanos();
        for (Clients stream : streams) {
            stream.closeIdle(now);
        }
        loop.schedule(this::sweep, SWEEP_NANOS, TimeUnit.NANOSECONDS);
    }

    /** Closes every connection. Nothing may be sent after it. */
    Future<Void> close() {
        closing = true;
        return channels.close();
    }
}
