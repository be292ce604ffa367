package backcone.lsp;

import com.google.gson.JsonParseException;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import java.util.Locale;
import org.eclipse.lsp4j.jsonrpc.MessageConsumer;
import org.eclipse.lsp4j.jsonrpc.MessageIssueException;
import org.eclipse.lsp4j.jsonrpc.json.MessageJsonHandler;
import org.eclipse.lsp4j.jsonrpc.messages.Either;
import org.eclipse.lsp4j.jsonrpc.messages.Message;
import org.eclipse.lsp4j.jsonrpc.messages.NotificationMessage;
import org.eclipse.lsp4j.jsonrpc.messages.RequestMessage;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseError;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseErrorCode;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseMessage;
import org.jspecify.annotations.Nullable;

/**
 * Reads messages, whatever else comes down the stream. A body is read whole before it is looked at; after a wrong length or a
 * broken header the next header is looked for; nothing that a handler throws ends the reading. Requests at the wrong time of
 * the protocol are answered here.
 */
final class Wire {
    private static final byte[] HEADER = "content-length:".getBytes(StandardCharsets.US_ASCII);
    private static final int LARGEST = 128 << 20;

    private enum Life {
        NEW,
        STARTED,
        ENDED
    }

    private final InputStream in;
    private final MessageJsonHandler json;
    private final MessageConsumer out;
    private final MessageConsumer handler;
    private final PrintStream log;
    private byte[] ahead = new byte[0];
    private int at;
    private Life life = Life.NEW;

    Wire(InputStream in, MessageJsonHandler json, MessageConsumer out, MessageConsumer handler, PrintStream log) {
        this.in = in;
        this.json = json;
        this.out = out;
        this.handler = handler;
        this.log = log;
    }

    /** Whether the client has asked to shut down. */
    boolean isEnded() {
        return life == Life.ENDED;
    }

    /** Reads until the stream ends. */
    void run() throws IOException {
        while (true) {
            long length = header();
            if (length < 0) {
                return;
            }
            if (length > LARGEST) {
                skip(length);
                fail(ResponseErrorCode.InvalidRequest, "A message of " + length + " bytes is not read.");
                continue;
            }
            byte[] body = body((int) length);
            if (body == null) {
                return;
            }
            take(body);
        }
    }

    private int read() throws IOException {
        if (at < ahead.length) {
            return ahead[at++] & 0xff;
        }
        return in.read();
    }

    /** The length in the next header block, wherever that begins; −1 at the end. */
    private long header() throws IOException {
        int k = 0;
        while (true) {
            int c = read();
            if (c < 0) {
                return -1;
            }
            int low = c >= 'A' && c <= 'Z' ? c + 32 : c;
            if (low == HEADER[k]) {
                k++;
            } else {
                k = low == HEADER[0] ? 1 : 0;
            }
            if (k < HEADER.length) {
                continue;
            }
            k = 0;
            long n = 0;
            boolean digits = false;
            c = read();
            while (c == ' ' || c == '\t') {
                c = read();
            }
            while (c >= '0' && c <= '9') {
                n = Math.min(n * 10 + (c - '0'), Long.MAX_VALUE / 100);
                digits = true;
                c = read();
            }
            if (!digits) {
                if (c < 0) {
                    return -1;
                }
                continue;
            }
            // the rest of the header block, up to an empty line
            int ends = c == '\n' ? 1 : 0;
            while (ends < 2) {
                if (c < 0) {
                    return -1;
                }
                c = read();
                if (c == '\n') {
                    ends++;
                } else if (c != '\r') {
                    ends = 0;
                }
            }
            return n;
        }
    }

    private byte @Nullable [] body(int length) throws IOException {
        byte[] b = new byte[length];
        int have = Math.min(length, ahead.length - at);
        System.arraycopy(ahead, at, b, 0, have);
        at += have;
        while (have < length) {
            int n = in.read(b, have, length - have);
            if (n < 0) {
                return null;
            }
            have += n;
        }
        return b;
    }

    private void skip(long length) throws IOException {
        long left = length;
        while (left > 0 && read() >= 0) {
            left--;
        }
    }

    private void take(byte[] body) {
        Message m = null;
        int last = body.length - 1;
        while (last >= 0 && body[last] <= ' ') {
            last--;
        }
        if (last < 0 || body[last] != '}') { // cut off, or followed by what belongs to the next one
            if (!resynchronise(body)) {
                fail(ResponseErrorCode.ParseError, "This message is no JSON object that can be read.");
            }
            return;
        }
        try {
            m = json.parseMessage(new String(body, StandardCharsets.UTF_8));
        } catch (MessageIssueException e) {
            issue(e);
            return;
        } catch (JsonParseException e) {
            if (!resynchronise(body)) {
                fail(ResponseErrorCode.ParseError, "This message is no JSON that can be read.");
            }
            return;
        } catch (Throwable e) { // a stack overflow on nested brackets too
            fail(ResponseErrorCode.ParseError, "This message can't be read.");
            return;
        }
        if (m == null) {
            fail(ResponseErrorCode.InvalidRequest, "This message is empty.");
            return;
        }
        try {
            if (passes(m)) {
                handler.consume(m);
            }
        } catch (Throwable e) {
            log.println("backcone: " + e);
            if (m instanceof RequestMessage r) {
                answer(r, ResponseErrorCode.InternalError, "The server met a fault of its own: " + e);
            }
        }
    }

    /** A length that is too large swallows the next header: what stands before it is one message, the rest is read again. */
    private boolean resynchronise(byte[] body) {
        int found = -1;
        for (int i = 1; i < body.length && found < 0; i++) {
            int k = 0;
            while (k < HEADER.length && i + k < body.length && lower(body[i + k]) == HEADER[k]) {
                k++;
            }
            if (k == HEADER.length || (k > 0 && i + k == body.length)) {
                found = i;
            }
        }
        if (found < 0) {
            return false;
        }
        ByteArrayOutputStream rest = new ByteArrayOutputStream();
        rest.write(body, found, body.length - found);
        rest.write(ahead, at, ahead.length - at);
        ahead = rest.toByteArray();
        at = 0;
        byte[] first = java.util.Arrays.copyOf(body, found);
        try {
            Message m = json.parseMessage(new String(first, StandardCharsets.UTF_8));
            if (m != null) {
                take(first);
                return true;
            }
        } catch (RuntimeException e) {
            return false;
        }
        return false;
    }

    private static int lower(byte b) {
        return b >= 'A' && b <= 'Z' ? b + 32 : b;
    }

    private boolean passes(Message m) {
        if (m instanceof RequestMessage r) {
            String method = r.getMethod();
            if (method == null) {
                answer(r, ResponseErrorCode.InvalidRequest, "A request names its method.");
                return false;
            }
            if (method.equals("initialize")) {
                if (life != Life.NEW) {
                    answer(r, ResponseErrorCode.InvalidRequest, "This server is initialized already.");
                    return false;
                }
                life = Life.STARTED;
                return true;
            }
            if (life == Life.NEW) {
                answer(r, ResponseErrorCode.ServerNotInitialized, "Send `initialize` first.");
                return false;
            }
            if (life == Life.ENDED) {
                answer(r, ResponseErrorCode.InvalidRequest, "This server has been shut down.");
                return false;
            }
            if (method.startsWith("$/")) {
                answer(r, ResponseErrorCode.MethodNotFound, "There is no request `" + method + "`.");
                return false;
            }
            if (method.equals("shutdown")) {
                life = Life.ENDED;
            }
            return true;
        }
        if (m instanceof NotificationMessage n) {
            String method = n.getMethod() == null ? "" : n.getMethod();
            if (method.equals("exit")) {
                return true;
            }
            return life == Life.STARTED || (life == Life.ENDED && method.equals("$/cancelRequest"));
        }
        return true;
    }

    private void issue(MessageIssueException e) {
        Message m = e.getRpcMessage();
        String what = e.getIssues().isEmpty()
                ? ""
                : String.valueOf(e.getIssues().get(0).getText());
        if (m instanceof RequestMessage r) {
            answer(r, ResponseErrorCode.InvalidParams, what);
        } else {
            log.println("backcone: a message that can't be used: " + what);
        }
    }

    private void answer(RequestMessage r, ResponseErrorCode code, String message) {
        ResponseMessage a = new ResponseMessage();
        Either<String, Number> id = r.getRawId();
        if (id != null && id.isLeft()) {
            a.setId(id.getLeft());
        } else if (id != null && id.isRight()) {
            a.setRawId(id);
        }
        a.setError(new ResponseError(code, message, null));
        send(a);
    }

    private void fail(ResponseErrorCode code, String message) {
        ResponseMessage a = new ResponseMessage();
        a.setError(new ResponseError(code, message.toLowerCase(Locale.ROOT).isEmpty() ? "?" : message, null));
        send(a);
    }

    private void send(ResponseMessage a) {
        try {
            out.consume(a);
        } catch (RuntimeException e) {
            log.println("backcone: " + e);
        }
    }
}
