package backcone.lsp;

import java.io.BufferedInputStream;
import java.io.BufferedOutputStream;
import java.io.FileDescriptor;
import java.io.FileInputStream;
import java.io.FileOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.io.PrintStream;
import java.time.LocalDate;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.function.IntConsumer;
import org.eclipse.lsp4j.jsonrpc.RemoteEndpoint;
import org.eclipse.lsp4j.jsonrpc.ResponseErrorException;
import org.eclipse.lsp4j.jsonrpc.json.JsonRpcMethod;
import org.eclipse.lsp4j.jsonrpc.json.MessageJsonHandler;
import org.eclipse.lsp4j.jsonrpc.json.StreamMessageConsumer;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseError;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseErrorCode;
import org.eclipse.lsp4j.jsonrpc.services.ServiceEndpoints;
import org.eclipse.lsp4j.services.LanguageClient;

/** {@code backcone serve}: the protocol on standard input and output, and nothing else there. */
public final class ServerMain {
    private ServerMain() {}

    /** Serves until the client says exit or its end of the stream closes; returns the exit status. */
    public static int serve() {
        InputStream in = new BufferedInputStream(new FileInputStream(FileDescriptor.in), 1 << 16);
        OutputStream out = new BufferedOutputStream(new FileOutputStream(FileDescriptor.out), 1 << 16);
        // whatever prints by mistake must not come between messages
        System.setOut(System.err);
        java.util.logging.LogManager.getLogManager().reset();
        return serve(in, out, System.err, Runtime.getRuntime()::halt);
    }

    static int serve(InputStream in, OutputStream out, PrintStream log, IntConsumer exit) {
        return session(in, out, log, exit).ended ? 0 : 1;
    }

    /** One session, up to the end of its stream. */
    static Desk session(InputStream in, OutputStream out, PrintStream log, IntConsumer exit) {
        Desk desk = new Desk(log, LocalDate.now());
        BackconeServer server = new BackconeServer(desk, status -> {
            log.flush();
            exit.accept(status);
        });
        Map<String, JsonRpcMethod> methods = new LinkedHashMap<>();
        methods.putAll(ServiceEndpoints.getSupportedMethods(LanguageClient.class));
        methods.putAll(ServiceEndpoints.getSupportedMethods(BackconeServer.class));
        MessageJsonHandler json = new MessageJsonHandler(methods);
        StreamMessageConsumer writer = new StreamMessageConsumer(out, json);
        RemoteEndpoint remote = new RemoteEndpoint(writer, ServiceEndpoints.toEndpoint(server), e -> error(e, desk));
        json.setMethodProvider(remote);
        server.connect(ServiceEndpoints.toServiceObject(remote, LanguageClient.class));
        Wire wire = new Wire(in, json, writer, remote, log);
        try {
            wire.run();
        } catch (IOException e) {
            log.println("backcone: " + e);
        }
        desk.ended = wire.isEnded();
        return desk;
    }

    /** What a client is told of a fault: never a stack trace. */
    private static ResponseError error(Throwable e, Desk desk) {
        Throwable x = e;
        while (x != null) {
            if (x instanceof ResponseErrorException r) {
                return r.getResponseError();
            }
            if (x instanceof java.util.concurrent.CancellationException) {
                return new ResponseError(ResponseErrorCode.RequestCancelled, "The request was cancelled.", null);
            }
            x = x.getCause();
        }
        desk.fault(e);
        return new ResponseError(ResponseErrorCode.InternalError, "The server met a fault of its own.", null);
    }
}
