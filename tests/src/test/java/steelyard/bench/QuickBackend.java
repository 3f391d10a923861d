package steelyard.bench;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelInitializer;
import java.net.InetSocketAddress;
import java.nio.charset.StandardCharsets;

/** Answers every request without content with the same 512 bytes, and does nothing else. */
final class QuickBackend implements AutoCloseable {
    static final int CONTENT = 512;

    private static final ByteBuf ANSWER = Unpooled.unreleasableBuffer(Unpooled.directBuffer()
            .writeBytes(("HTTP/1.1 200 OK\r\nDate: Tue, 01 Dec 2026 12:00:00 GMT\r\nContent-Type: text/plain\r\n"
                            + "Content-Length: " + CONTENT + "\r\n\r\n" + "x".repeat(CONTENT))
                    .getBytes(StandardCharsets.US_ASCII)));

    private final Loops loops = new Loops("bench-backend");
    private final InetSocketAddress address;

    QuickBackend() throws InterruptedException {
        address = (InetSocketAddress) loops.server()
                .childHandler(new ChannelInitializer<Channel>() {
                    @Override
                    protected void initChannel(Channel channel) {
                        channel.pipeline().addLast(new Answering());
                    }
                })
                .bind()
                .sync()
                .channel()
                .localAddress();
    }

    InetSocketAddress address() {
        return address;
    }

    @Override
    public void close() {
        loops.close();
    }

    private static final class Answering extends ChannelInboundHandlerAdapter {
        private final HeadEnds ends = new HeadEnds();

        @Override
        public void channelRead(ChannelHandlerContext context, Object message) {
            ByteBuf buffer = (ByteBuf) message;
            while (buffer.isReadable()) {
                if (ends.skipHead(buffer)) {
                    context.write(ANSWER.duplicate(), context.voidPromise());
                }
            }
            buffer.release();
        }

        @Override
        public void channelReadComplete(ChannelHandlerContext context) {
            context.flush();
        }
    }
}
