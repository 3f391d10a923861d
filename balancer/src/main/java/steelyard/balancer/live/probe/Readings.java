package steelyard.balancer.live.probe;

import io.netty.bootstrap.Bootstrap;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelFuture;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInitializer;
import io.netty.channel.SimpleChannelInboundHandler;
import io.netty.handler.codec.http.DefaultFullHttpRequest;
import io.netty.handler.codec.http.FullHttpRequest;
import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpClientCodec;
import io.netty.handler.codec.http.HttpHeaderNames;
import io.netty.handler.codec.http.HttpHeaderValues;
import io.netty.handler.codec.http.HttpMethod;
import io.netty.handler.codec.http.HttpObjectAggregator;
import io.netty.handler.codec.http.HttpVersion;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.function.IntFunction;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.live.tcp.Transport;
import steelyard.balancer.live.tls.BackendTls;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.LoadSettings;
import steelyard.balancer.settings.PoolSettings;

/**
 * Reads load pages, each on a connection of its own. A reading is good when the whole page of an answer of 200 to 299 is
 * in. All methods are called on the home loop.
 */
public final class Readings {
    private static final int MOST_BYTES = 256 * 1024;

    private final GuardedDecider decider;
    private final Bootstrap client;
    private final List<Lane> lanes = new ArrayList<>();
    private boolean closed;

    /**
     * @param addresses by backend number
     * @param tls by pool number; null for a pool without it
     */
    public Readings(
            BalancerSettings settings,
            GuardedDecider decider,
            Transport transport,
            List<InetSocketAddress> addresses,
            IntFunction<@Nullable BackendTls> tls) {
        this.decider = decider;
        this.client = transport.client(transport.home());
        for (int pool = 0; pool < settings.pools().size(); pool++) {
            PoolSettings of = settings.pools().get(pool);
            for (int i = 0; i < of.backends().size(); i++) {
                lanes.add(new Lane(addresses.get(lanes.size()), of.load(), tls.apply(pool)));
            }
        }
    }

    /** Starts reading number {@code number} of a backend. */
    public void start(int backend, long number) {
        Lane lane = lanes.get(backend);
        LoadSettings settings = lane.settings;
        if (closed || settings == null) {
            return;
        }
        Reading started = new Reading(backend, number, settings);
        lane.running = started;
        ChannelFuture connecting =
                client.clone().handler(pipeline(lane, started)).connect(lane.address);
        started.channel = connecting.channel();
        connecting.addListener(done -> {
            if (!done.isSuccess()) {
                started.read(null);
            }
        });
    }

    private static ChannelInitializer<Channel> pipeline(Lane lane, Reading started) {
        return new ChannelInitializer<>() {
            @Override
            protected void initChannel(Channel channel) {
                channel.pipeline()
                        .addLast(
                                new HttpClientCodec(),
                                new HttpObjectAggregator(MOST_BYTES),
                                new Page(started, lane.address));
                BackendTls.secure(lane.tls, channel);
            }
        };
    }

    /** Stops waiting for a reading. */
    public void drop(int backend, long number) {
        Reading running = lanes.get(backend).running;
        if (running != null && running.number == number) {
            running.drop();
        }
    }

    /** Drops every reading; none starts any more. */
    public void close() {
        closed = true;
        for (Lane lane : lanes) {
            if (lane.running != null) {
                lane.running.drop();
            }
        }
    }

    /** Where a backend's page is, and the reading that is under way: never two at once. */
    private static final class Lane {
        private final InetSocketAddress address;
        private final @Nullable LoadSettings settings;
        private final @Nullable BackendTls tls;
        private @Nullable Reading running;

        Lane(InetSocketAddress address, @Nullable LoadSettings settings, @Nullable BackendTls tls) {
            this.address = address;
            this.settings = settings;
            this.tls = tls;
        }
    }

    /** One reading, reported at most once. */
    private final class Reading {
        private final int backend;
        private final long number;
        private final LoadSettings settings;
        private @Nullable Channel channel;
        private boolean over;

        Reading(int backend, long number, LoadSettings settings) {
            this.backend = backend;
            this.number = number;
            this.settings = settings;
        }

        /** @param page null for one that did not come */
        void read(@Nullable String page) {
            if (!over) {
                drop();
                double[] gauges = page == null ? null : LoadPage.read(page, settings.gauges());
                decider.change((core, now) -> core.read(backend, number, gauges, now));
            }
        }

        void drop() {
            over = true;
            if (lanes.get(backend).running == this) {
                lanes.get(backend).running = null;
            }
            if (channel != null) {
                channel.close();
            }
        }
    }

    /** Asks for the page and takes it. */
    private static final class Page extends SimpleChannelInboundHandler<FullHttpResponse> {
        private final Reading reading;
        private final InetSocketAddress address;

        Page(Reading reading, InetSocketAddress address) {
            this.reading = reading;
            this.address = address;
        }

        @Override
        public void channelActive(ChannelHandlerContext context) {
            FullHttpRequest request = new DefaultFullHttpRequest(
                    HttpVersion.HTTP_1_1, HttpMethod.GET, reading.settings.path(), Unpooled.EMPTY_BUFFER);
            request.headers()
                    .set(HttpHeaderNames.HOST, address.getHostString() + ":" + address.getPort())
                    .set(HttpHeaderNames.ACCEPT, "application/openmetrics-text; version=1.0.0")
                    .set(HttpHeaderNames.CONNECTION, HttpHeaderValues.CLOSE);
            context.writeAndFlush(request, context.voidPromise());
        }

        @Override
        protected void channelRead0(ChannelHandlerContext context, FullHttpResponse answer) {
            int status = answer.status().code();
            boolean good = answer.decoderResult().isSuccess() && status >= 200 && status <= 299;
            reading.read(good ? answer.content().toString(StandardCharsets.UTF_8) : null);
        }

        @Override
        public void channelInactive(ChannelHandlerContext context) {
            reading.read(null);
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            reading.read(null);
        }
    }
}
