package steelyard.bench;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelInitializer;
import java.lang.management.ManagementFactory;
import java.lang.management.ThreadInfo;
import java.lang.management.ThreadMXBean;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.IntStream;
import org.HdrHistogram.Histogram;

/**
 * 32 clients on one event loop, each of which sends its next request when the last answer is whole. Each asks for a path of
 * its own, so that a method that hashes paths spreads them.
 */
final class ClosedLoop implements AutoCloseable {
    private static final int CLIENTS = 32;
    private static final long HIGHEST_NANOS = 60_000_000_000L;
    private static final double SETTLE_SECONDS = 0.15;

    private static final List<ByteBuf> REQUESTS =
            IntStream.range(0, CLIENTS).mapToObj(ClosedLoop::asking).toList();

    private final Loops loops = new Loops("bench-clients");
    private final ThreadMXBean threads = ManagementFactory.getThreadMXBean();
    private final com.sun.management.OperatingSystemMXBean system =
            (com.sun.management.OperatingSystemMXBean) ManagementFactory.getOperatingSystemMXBean();
    private final Histogram latencies = new Histogram(HIGHEST_NANOS, 3);
    private boolean counting;
    private boolean stopping;

    /** Connects, lets things settle, and measures for so many seconds. */
    Stretch play(InetSocketAddress target, String middleThreads, double seconds) throws Exception {
        stopping = false; // the connections that come next carry this over to their loop
        List<Channel> clients = new ArrayList<>();
        for (int i = 0; i < CLIENTS; i++) {
            int number = i;
            clients.add(loops.client()
                    .handler(new ChannelInitializer<Channel>() {
                        @Override
                        protected void initChannel(Channel channel) {
                            channel.pipeline().addLast(new Client(number));
                        }
                    })
                    .connect(target)
                    .sync()
                    .channel());
        }
        Thread.sleep((long) (SETTLE_SECONDS * 1000));
        onLoop(clients, () -> {
            latencies.reset();
            counting = true;
        });
        long start = System.nanoTime();
        long cpu = system.getProcessCpuTime();
        long middle = cpuOf(middleThreads);
        Thread.sleep((long) (seconds * 1000));
        onLoop(clients, () -> {
            counting = false;
            stopping = true;
        });
        long took = System.nanoTime() - start;
        cpu = system.getProcessCpuTime() - cpu;
        middle = cpuOf(middleThreads) - middle;
        for (Channel client : clients) {
            client.closeFuture().sync();
        }
        if (latencies.getTotalCount() == 0) {
            throw new IllegalStateException("no answer came from " + target);
        }
        return new Stretch(took, latencies.copy(), cpu, middle);
    }

    /** What a client sends, again and again; shared, and never released. */
    static ByteBuf request(int client) {
        return REQUESTS.get(client).duplicate();
    }

    private static ByteBuf asking(int client) {
        String head = "GET /sailings/" + (100 + client) + " HTTP/1.1\r\nHost: skerry.example\r\nAccept: */*\r\n"
                + "User-Agent: steelyard-bench\r\nSteelyard-Request: 1000001\r\n\r\n";
        return Unpooled.unreleasableBuffer(
                Unpooled.directBuffer().writeBytes(head.getBytes(StandardCharsets.US_ASCII)));
    }

    private static void onLoop(List<Channel> clients, Runnable what) throws Exception {
        clients.get(0).eventLoop().submit(what).sync();
    }

    private long cpuOf(String prefix) {
        long sum = 0;
        for (ThreadInfo thread : threads.getThreadInfo(threads.getAllThreadIds())) {
            if (thread != null && thread.getThreadName().startsWith(prefix)) {
                sum += threads.getThreadCpuTime(thread.getThreadId());
            }
        }
        return sum;
    }

    @Override
    public void close() {
        loops.close();
    }

    private final class Client extends ChannelInboundHandlerAdapter {
        private final int number;
        private final HeadEnds ends = new HeadEnds();
        private int contentLeft;
        private long sentAt;

        Client(int number) {
            this.number = number;
        }

        @Override
        public void channelActive(ChannelHandlerContext context) {
            send(context);
        }

        private void send(ChannelHandlerContext context) {
            sentAt = System.nanoTime();
            context.writeAndFlush(request(number), context.voidPromise());
        }

        @Override
        public void channelRead(ChannelHandlerContext context, Object message) {
            ByteBuf buffer = (ByteBuf) message;
            while (buffer.isReadable()) {
                if (contentLeft == 0) {
                    contentLeft = ends.skipHead(buffer) ? QuickBackend.CONTENT : 0;
                } else {
                    int taken = Math.min(contentLeft, buffer.readableBytes());
                    buffer.skipBytes(taken);
                    contentLeft -= taken;
                    if (contentLeft == 0) {
                        answered(context);
                    }
                }
            }
            buffer.release();
        }

        private void answered(ChannelHandlerContext context) {
            if (counting) {
                latencies.recordValue(System.nanoTime() - sentAt);
            }
            if (stopping) {
                context.close();
            } else {
                send(context);
            }
        }
    }
}
