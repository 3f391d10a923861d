package steelyard.balancer.live.tcp;

import io.netty.bootstrap.Bootstrap;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.ChannelOption;
import io.netty.channel.socket.ChannelInputShutdownEvent;
import io.netty.handler.ssl.SslCloseCompletionEvent;
import io.netty.handler.ssl.SslHandshakeCompletionEvent;
import io.netty.util.ReferenceCountUtil;
import io.netty.util.concurrent.Future;
import java.util.ArrayDeque;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Ask;
import steelyard.balancer.core.decide.Decider;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.guard.ClientKeys;
import steelyard.balancer.live.guard.WaitingRoom;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.live.tls.Ends;

/**
 * One client connection of a pool of octets, from its acceptance to its end: a backend is picked and connected to, then a
 * {@link Relay} takes over. What the client sends before that waits here. Used on its loop only.
 */
final class Passage extends ChannelInboundHandlerAdapter {
    private final TcpPool pool;
    private final Bootstrap toBackends;
    private final WaitingRoom room;
    private final Set<Passage> all;
    private final Channel client;
    private final Ask ask = new Ask();
    private final ArrayDeque<Object> early = new ArrayDeque<>();
    private boolean finished;
    private int backend = Decider.NOBODY;
    private boolean waiting;
    private boolean inFlight;
    private boolean gone;
    private @Nullable Channel connecting;
    private @Nullable Relay relay;

    /** @param all the passages of this loop, which this one enters and leaves */
    Passage(TcpPool pool, Bootstrap toBackends, WaitingRoom room, Set<Passage> all, Channel client) {
        this.pool = pool;
        this.toBackends = toBackends;
        this.room = room;
        this.all = all;
        this.client = client;
    }

    /** The backend that it counts on, or {@link Decider#NOBODY}. */
    int backend() {
        return inFlight ? backend : Decider.NOBODY;
    }

    // ---- from the client, before the relay

    @Override
    public void channelActive(ChannelHandlerContext context) {
        all.add(this);
        if (pool.tls() == null) {
            begin();
        }
    }

    @Override
    public void userEventTriggered(ChannelHandlerContext context, Object event) {
        if (event instanceof SslHandshakeCompletionEvent handshake && handshake.isSuccess()) {
            begin();
        } else if (event instanceof ChannelInputShutdownEvent
                || event instanceof SslCloseCompletionEvent closing && closing.isSuccess()) {
            finished = true;
        }
    }

    @Override
    public void channelRead(ChannelHandlerContext context, Object message) {
        early.add(message);
    }

    @Override
    public void channelInactive(ChannelHandlerContext context) {
        leave(Outcome.ABANDONED);
    }

    @Override
    public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
        client.close();
    }

    // ---- attempts

    private void begin() {
        client.config().setAutoRead(false);
        client.config().setOption(ChannelOption.ALLOW_HALF_CLOSURE, true);
        ask.pool = pool.number();
        ask.request = pool.numbers().decrementAndGet();
        ask.client = ClientKeys.of(client.remoteAddress());
        ask.key = ask.client;
        pick();
    }

    private void pick() {
        ask.ticket = room.ticket();
        int picked = pool.decider().pick(ask);
        if (picked == Decider.WAITING) {
            waiting = true;
            room.enter(ask.ticket, this::placed);
        } else {
            placed(picked);
        }
    }

    private void placed(int picked) {
        waiting = false;
        backend = picked;
        inFlight = picked != Decider.NOBODY;
        if (gone) {
            ended(Outcome.ABANDONED);
        } else if (inFlight) {
            connect();
        } else {
            client.close();
        }
    }

    private void connect() {
        ChannelFuture opening = toBackends
                .clone()
                .handler(new ChannelInitializer<Channel>() {
                    @Override
                    protected void initChannel(Channel channel) {
                        BackendTls.secure(pool.backendTls(), channel);
                    }
                })
                .connect(pool.addresses().get(backend));
        connecting = opening.channel();
        Ends.whenUsable(opening, done -> opened(opening.channel(), done));
    }

    private void opened(Channel opened, Future<?> done) {
        if (opened != connecting) {
            opened.close(); // given up in the meantime
        } else if (done.isSuccess()) {
            connecting = null;
            join(opened);
        } else {
            connecting = null;
            opened.close();
            refused();
        }
    }

    private void refused() {
        ended(Outcome.REFUSED);
        boolean again = pool.settings().retry() != null
                && pool.decider()
                        .retry(pool.number(), ask.request, ask.attempt, Outcome.REFUSED, 0, false, false, true);
        if (again) {
            ask.again(backend);
            pick();
        } else {
            client.close();
        }
    }

    private void join(Channel opened) {
        Relay joined = new Relay(client, opened, pool.settings().timeouts().idleNanos(), this::relayEnded);
        relay = joined;
        client.pipeline().remove(this);
        joined.join();
        while (!early.isEmpty()) {
            joined.fromClient(early.remove());
        }
        if (finished) {
            joined.clientFinished();
        }
        joined.start();
    }

    private void relayEnded(Outcome outcome) {
        all.remove(this);
        ended(outcome);
    }

    // ---- ends

    /** The limit of a drain is over. */
    void cut() {
        if (relay != null) {
            relay.cut();
        } else {
            leave(Outcome.CUT);
            Ends.reset(client);
        }
    }

    private void leave(Outcome outcome) {
        if (gone) {
            return;
        }
        gone = true;
        all.remove(this);
        early.forEach(ReferenceCountUtil::release);
        early.clear();
        Channel opening = connecting;
        connecting = null;
        if (opening != null) {
            opening.close();
        }
        if (waiting && pool.decider().leave(ask.ticket)) {
            room.leave(ask.ticket);
        }
        ended(outcome);
    }

    private void ended(Outcome outcome) {
        if (inFlight) {
            inFlight = false;
            pool.decider().ended(backend, ask.request, ask.attempt, outcome, 0);
        }
    }
}
