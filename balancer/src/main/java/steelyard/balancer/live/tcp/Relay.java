package steelyard.balancer.live.tcp;

import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.channel.ChannelInboundHandlerAdapter;
import io.netty.channel.ChannelOption;
import io.netty.channel.socket.ChannelInputShutdownEvent;
import io.netty.handler.ssl.SslCloseCompletionEvent;
import io.netty.util.ReferenceCountUtil;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.decide.Outcome;
import steelyard.balancer.live.tls.Ends;

/**
 * Octets between a client and a backend, both ways and unseen, until both ways have ended.
 *
 * <p>Each way ends by itself: what one end says last is passed on before its end is, and the other way goes on. Who takes
 * slowly slows the other end down. A reset of the one becomes a reset of the other. Both channels are on one loop, and
 * everything here is used on it. TLS before version 1.3 knows no half of an end: there the first end closes both ways.
 */
public final class Relay {
    /** Told once: when both connections are closed, or just before both are reset. */
    @FunctionalInterface
    public interface Owner {
        /** {@link Outcome#ANSWERED} when both ways came to their own end. */
        void ended(Outcome outcome);
    }

    private final Side client;
    private final Side backend;
    private final Deadline idle;
    private final long idleNanos;
    private final Owner owner;
    private @Nullable Outcome outcome;
    private int open = 2;

    /** @param idleNanos when nothing moved for that long, both are reset */
    public Relay(Channel client, Channel backend, long idleNanos, Owner owner) {
        this.client = new Side(client, Outcome.ABANDONED);
        this.backend = new Side(backend, Outcome.BROKEN);
        this.client.other = this.backend;
        this.backend.other = this.client;
        this.idle = new Deadline(client.eventLoop(), () -> stop(Outcome.STALLED));
        this.idleNanos = idleNanos;
        this.owner = owner;
    }

    /** Takes both channels over: adds the last handler to each. Reads nothing yet. */
    public void join() {
        idle.in(idleNanos);
        client.join();
        backend.join();
    }

    /** Passes on what the client sent before; the message is the relay's from here on. */
    public void fromClient(Object message) {
        client.pass(message);
    }

    /** The client said before that nothing more comes. */
    public void clientFinished() {
        client.inputEnded();
    }

    /** Reads, from here on. */
    public void start() {
        client.start();
        backend.start();
    }

    /** Ends both ways at once. */
    public void cut() {
        stop(Outcome.CUT);
    }

    private void stop(Outcome why) {
        if (outcome == null && open > 0) {
            outcome = why;
            idle.stop();
            // Told before either end can see the reset: whoever asks why it broke off then finds the answer.
            owner.ended(why);
            Ends.reset(client.channel);
            Ends.reset(backend.channel);
        }
    }

    private void closed() {
        open--;
        if (open == 0 && outcome == null) {
            idle.stop();
            owner.ended(Outcome.ANSWERED);
        }
    }

    /** One end, as the other one's source. */
    private final class Side extends ChannelInboundHandlerAdapter {
        private final Channel channel;
        private final Outcome whenLost;
        private @Nullable Side other;
        private boolean inputEnded;
        private boolean outputEnded;
        private boolean closed;

        Side(Channel channel, Outcome whenLost) {
            this.channel = channel;
            this.whenLost = whenLost;
        }

        void join() {
            if (channel.isActive()) {
                channel.config().setOption(ChannelOption.ALLOW_HALF_CLOSURE, true);
                channel.pipeline().addLast(this);
            } else {
                lost();
                closed();
            }
        }

        void start() {
            if (!closed) {
                other().channel.flush();
                throttle();
            }
        }

        @Override
        public void channelRead(ChannelHandlerContext context, Object message) {
            idle.in(idleNanos);
            pass(message);
        }

        void pass(Object message) {
            Channel to = other().channel;
            if (outcome != null || inputEnded) {
                ReferenceCountUtil.release(message);
                return;
            }
            to.write(message, to.voidPromise());
            if (!to.isWritable()) {
                to.flush();
                throttle();
            }
        }

        @Override
        public void channelReadComplete(ChannelHandlerContext context) {
            other().channel.flush();
        }

        @Override
        public void channelWritabilityChanged(ChannelHandlerContext context) {
            idle.in(idleNanos);
            other().throttle();
        }

        /** Reads as long as the other end takes. */
        private void throttle() {
            boolean reading = other().channel.isWritable();
            if (channel.config().isAutoRead() != reading) {
                channel.config().setAutoRead(reading);
            }
        }

        @Override
        public void userEventTriggered(ChannelHandlerContext context, Object event) {
            if (event instanceof ChannelInputShutdownEvent
                    || event instanceof SslCloseCompletionEvent closing && closing.isSuccess()) {
                inputEnded();
            }
        }

        private void inputEnded() {
            if (!inputEnded) {
                inputEnded = true;
                other().finish();
                closeWhenOver();
            }
        }

        /** Nothing more comes from the other end: says so behind what is still on its way. */
        private void finish() {
            channel.writeAndFlush(Unpooled.EMPTY_BUFFER)
                    .addListener(drained -> Ends.finish(channel).addListener(said -> {
                        outputEnded = true;
                        closeWhenOver();
                    }));
        }

        private void closeWhenOver() {
            if (inputEnded && outputEnded) {
                channel.close();
            }
        }

        @Override
        public void channelInactive(ChannelHandlerContext context) {
            lost();
            closed();
        }

        @Override
        public void exceptionCaught(ChannelHandlerContext context, Throwable cause) {
            stop(whenLost);
        }

        private void lost() {
            if (!(inputEnded && outputEnded)) {
                stop(whenLost);
            }
        }

        private void closed() {
            if (!closed) {
                closed = true;
                Relay.this.closed();
            }
        }

        private Side other() {
            if (other == null) {
                throw new IllegalStateException("a relay has two sides");
            }
            return other;
        }
    }
}
