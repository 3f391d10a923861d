package steelyard.balancer.live.http;

import io.netty.buffer.ByteBuf;
import io.netty.buffer.Unpooled;
import io.netty.channel.Channel;
import io.netty.channel.ChannelHandlerContext;
import io.netty.handler.codec.DecoderResult;
import io.netty.handler.codec.http.DefaultLastHttpContent;
import io.netty.handler.codec.http.HttpContent;
import io.netty.handler.codec.http.HttpDecoderConfig;
import io.netty.handler.codec.http.HttpMessage;
import io.netty.handler.codec.http.HttpRequest;
import io.netty.handler.codec.http.HttpRequestDecoder;
import io.netty.handler.codec.http.HttpUtil;
import io.netty.handler.codec.http.LastHttpContent;
import io.netty.handler.codec.http.TooLongHttpLineException;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.balancer.settings.LimitSettings;

/**
 * Decodes requests within the limits of a pool.
 *
 * <p>What is over a limit or not strictly HTTP leaves here as a message whose decoding failed with a {@link Refusal}.
 * Netty's decoder reads one head a call and stops behind it, so that the octets which a call consumed are those of the
 * head, or of the content, that the call began in.
 */
final class RequestDecoder extends HttpRequestDecoder {
    /** Longer than any method that is registered or likely. */
    static final int MOST_METHOD = 64;

    /** Octets of framing that content may come with, besides 16 for each of its own: sizes, extensions, trailers. */
    private static final long MOST_FRAMING = 64 * 1024;

    private static final int FRAMING_EACH = 16;
    private static final int VERSION_AND_SPACES = 10;

    private final LimitSettings limits;
    private final HeadScan scan = new HeadScan();
    private boolean inContent;
    private boolean chunked;
    private boolean inTrailers;
    private boolean waiting;
    private long content;
    private long framing;
    private boolean upgrading;
    private boolean held;

    RequestDecoder(HttpDecoderConfig config, LimitSettings limits) {
        super(config);
        this.limits = limits;
    }

    /** The longest request line that is read at all. */
    static int longestLine(LimitSettings limits) {
        return MOST_METHOD + limits.targetBytes() + VERSION_AND_SPACES;
    }

    /** Whether a request has begun whose head is not whole. */
    boolean headOpen() {
        return !inContent && (scan.begun() || waiting);
    }

    /** Whether octets came behind a request to upgrade: they are left alone until its answer. */
    boolean holds() {
        return held && actualReadableBytes() > 0;
    }

    /** No upgrade came of it: what came behind is requests. */
    void release(Channel channel) {
        boolean more = holds();
        upgrading = false;
        held = false;
        if (more) {
            readOn(channel.pipeline().context(this));
        }
    }

    private void readOn(ChannelHandlerContext context) {
        try {
            channelRead(context, Unpooled.EMPTY_BUFFER);
            channelReadComplete(context);
        } catch (Exception e) { // as reading declares; it tells of failures by messages
            context.fireExceptionCaught(e);
        }
    }

    @Override
    protected HttpMessage createMessage(String[] line) throws Exception {
        if (!line[2].startsWith("HTTP/")) { // the decoder itself would take small letters
            throw new Refusal(OwnAnswer.FAULTY); // RFC 9112, 2.3
        }
        return super.createMessage(line);
    }

    @Override
    protected void decode(ChannelHandlerContext context, ByteBuf buffer, List<Object> out) throws Exception {
        if (held) {
            return; // what follows may be of another protocol
        }
        int from = buffer.readerIndex();
        int before = out.size();
        boolean head = !inContent;
        super.decode(context, buffer, out);
        int consumed = buffer.readerIndex() - from;
        framing += consumed;
        if (head || inTrailers) {
            buffer.forEachByte(from, consumed, scan);
        } else if (out.size() == before && lastChunk(buffer, from, buffer.readerIndex())) {
            inTrailers = true;
            scan.trailers();
        }
        for (int i = before; i < out.size(); i++) {
            out.set(i, checked(out.get(i)));
        }
        waiting = !inContent && buffer.isReadable();
    }

    /** Whether this is the line of a chunk of size 0, behind which trailer fields follow. */
    private boolean lastChunk(ByteBuf buffer, int from, int to) {
        int at = from;
        while (at < to && buffer.getByte(at) == '0') {
            at++;
        }
        return chunked && at > from && at < to && "\r; \t".indexOf(buffer.getByte(at)) >= 0;
    }

    private Object checked(Object part) {
        if (part instanceof HttpRequest request) {
            begun(request);
        }
        return part instanceof HttpContent piece ? counted(piece) : part;
    }

    private void begun(HttpRequest request) {
        inContent = true;
        upgrading = request.decoderResult().isSuccess() && Upgrade.asked(request) != null;
        chunked = HttpUtil.isTransferEncodingChunked(request);
        content = 0;
        framing = 0;
        Refusal refusal = refusal(request);
        if (refusal != null) {
            request.setDecoderResult(DecoderResult.failure(refusal));
        }
        scan.reset();
    }

    /** A line that is too long is that by its target, unless even the method is. */
    private @Nullable Refusal refusal(HttpRequest request) {
        if (scan.method() > MOST_METHOD) {
            return new Refusal(OwnAnswer.LONG_METHOD);
        }
        boolean longLine = request.decoderResult().cause() instanceof TooLongHttpLineException;
        if (longLine || scan.target() > limits.targetBytes()) {
            return new Refusal(OwnAnswer.TOO_LONG_TARGET);
        }
        if (request.decoderResult().isFailure()) {
            return null; // says itself why
        }
        if (scan.octets() > limits.headBytes()) {
            return new Refusal(OwnAnswer.TOO_LARGE_FIELDS);
        }
        if (scan.faulty()) {
            return new Refusal(OwnAnswer.FAULTY);
        }
        boolean large = HttpUtil.getContentLength(request, 0L) > limits.bodyBytes();
        return large ? new Refusal(OwnAnswer.TOO_LARGE_CONTENT) : null;
    }

    private HttpContent counted(HttpContent piece) {
        int octets = piece.content().readableBytes();
        content += octets;
        framing -= octets;
        boolean faulty = inTrailers && scan.faulty();
        if (piece instanceof LastHttpContent) {
            inContent = false;
            held = upgrading;
            inTrailers = false;
            scan.reset();
        }
        if (content > limits.bodyBytes()) {
            return refused(piece, OwnAnswer.TOO_LARGE_CONTENT);
        }
        faulty |= framing > MOST_FRAMING + FRAMING_EACH * content;
        return faulty ? refused(piece, OwnAnswer.FAULTY) : piece;
    }

    private static HttpContent refused(HttpContent piece, OwnAnswer answer) {
        piece.release();
        HttpContent refused = new DefaultLastHttpContent(Unpooled.EMPTY_BUFFER);
        refused.setDecoderResult(DecoderResult.failure(new Refusal(answer)));
        return refused;
    }
}
