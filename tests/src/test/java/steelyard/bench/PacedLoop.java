package steelyard.bench;

import io.netty.buffer.ByteBuf;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.EventLoop;
import java.net.InetSocketAddress;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.HdrHistogram.Histogram;

/**
 * Clients on one event loop that send when a request is due, evenly spaced, whether or not earlier ones were answered; one
 * that finds all 128 connections busy waits for the next that is free. Latency counts from when it was due.
 */
final class PacedLoop implements AutoCloseable {
    private static final int CONNECTIONS = 128;
    private static final long HIGHEST_NANOS = 60_000_000_000L;
    private static final double SETTLE_SECONDS = 0.2;
    private static final long TICK_NANOS = 100_000;

    private final Loops loops = new Loops("bench-clients");
    private final Histogram latencies = new Histogram(HIGHEST_NANOS, 3);
    private final ArrayDeque<Client> idle = new ArrayDeque<>();
    private final ArrayDeque<Long> waiting = new ArrayDeque<>();

    /** Sends for so many seconds at a rate; gives the latencies of all but the first moments. */
    Histogram play(InetSocketAddress target, double perSecond, double seconds) throws Exception {
        List<Channel> channels = new ArrayList<>();
        for (int i = 0; i < CONNECTIONS; i++) {
            channels.add(
                    loops.client().handler(new Client()).connect(target).sync().channel());
        }
        EventLoop loop = channels.get(0).eventLoop();
        Pace pace = new Pace(loop, perSecond, seconds);
        loop.execute(pace::begin);
        Thread.sleep((long) ((SETTLE_SECONDS + seconds) * 1000) + 300);
        Histogram seen = loop.submit(latencies::copy).sync().getNow();
        for (Channel channel : channels) {
            channel.close().sync();
        }
        loop.submit(() -> {
                    idle.clear();
                    waiting.clear();
                })
                .sync();
        return seen;
    }

    @Override
    public void close() {
        loops.close();
    }

    /** Hands out what is due, from a timer that ticks more often than that on its own. */
    private final class Pace {
        private final EventLoop loop;
        private final double gapNanos;
        private final double seconds;
        private long startNanos;
        private long sent;

        Pace(EventLoop loop, double perSecond, double seconds) {
            this.loop = loop;
            this.gapNanos = 1e9 / perSecond;
            this.seconds = seconds;
        }

        void begin() {
            startNanos = System.nanoTime();
            latencies.reset();
            tick();
        }

        private void tick() {
            long elapsed = System.nanoTime() - startNanos;
            while (sent * gapNanos <= elapsed) {
                long due = startNanos + (long) (sent++ * gapNanos);
                if (elapsed < SETTLE_SECONDS * 1e9) {
                    due = -1; // not counted
                }
                Client client = idle.pollLast();
                if (client == null) {
                    waiting.add(due);
                } else {
                    client.send(due);
                }
            }
            if (elapsed < (SETTLE_SECONDS + seconds) * 1e9) {
                loop.schedule(this::tick, TICK_NANOS, TimeUnit.NANOSECONDS);
            }
        }
    }

    private final class Client extends ChannelInboundHandlerAdapter {
        private final HeadEnds ends = new HeadEnds();
        private ChannelHandlerContext context;
        private int contentLeft;
        private long dueNanos;

        @Override
        public void channelActive(ChannelHandlerContext active) {
            context = active;
            idle.add(this);
        }

        void send(long due) {
            dueNanos = due;
            context.writeAndFlush(ClosedLoop.request(0), context.voidPromise());
        }

        @Override
        public void channelRead(ChannelHandlerContext active, Object message) {
            ByteBuf buffer = (ByteBuf) message;
            while (buffer.isReadable()) {
                if (contentLeft == 0) {
                    contentLeft = ends.skipHead(buffer) ? QuickBackend.CONTENT : 0;
                } else {
                    int taken = Math.min(contentLeft, buffer.readableBytes());
                    buffer.skipBytes(taken);
                    contentLeft -= taken;
                    if (contentLeft == 0) {
                        answered();
                    }
                }
            }
            buffer.release();
        }

        private void answered() {
            if (dueNanos != -1) {
                latencies.recordValue(System.nanoTime() - dueNanos);
            }
            Long next = waiting.poll();
            if (next == null) {
                idle.add(this);
            } else {
                send(next);
            }
        }
    }
}
