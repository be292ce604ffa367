package backcone.lsp;

import backcone.engine.editing.Paint;
import backcone.engine.text.FileId;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.function.IntConsumer;
import org.eclipse.lsp4j.*;
import org.eclipse.lsp4j.jsonrpc.messages.Either;
import org.eclipse.lsp4j.services.LanguageClient;
import org.eclipse.lsp4j.services.LanguageServer;
import org.eclipse.lsp4j.services.TextDocumentService;
import org.eclipse.lsp4j.services.WorkspaceService;
import org.jspecify.annotations.Nullable;

/** The life of the server: what it offers, and how it ends. */
public final class BackconeServer implements LanguageServer {
    private final Desk desk;
    private final TextRequests texts;
    private final WorkspaceRequests workspace;
    private final IntConsumer exit;
    private boolean ended;
    private boolean dynamicWatch;
    private boolean scan = true;
    private final java.util.Set<Either<String, Integer>> cancelled = java.util.concurrent.ConcurrentHashMap.newKeySet();

    BackconeServer(Desk desk, IntConsumer exit) {
        this.desk = desk;
        this.texts = new TextRequests(desk);
        this.workspace = new WorkspaceRequests(desk);
        this.exit = exit;
    }

    void connect(LanguageClient client) {
        desk.client = client;
    }

    @Override
    public CompletableFuture<InitializeResult> initialize(InitializeParams p) {
        boolean utf8 = capabilities(p.getCapabilities());
        desk.settings = desk.settings.with(p.getInitializationOptions());
        List<WorkspaceFolder> folders = p.getWorkspaceFolders();
        if (folders != null && !folders.isEmpty()) {
            for (WorkspaceFolder f : folders) {
                root(f.getUri());
            }
        } else {
            root(rootOf(p));
        }
        Integer parent = p.getProcessId();
        if (parent != null) {
            ProcessHandle.of(parent).ifPresent(h -> h.onExit().thenRun(() -> exit.accept(1)));
        }
        InitializeResult r = new InitializeResult(offers(utf8));
        ServerInfo info = new ServerInfo("backcone");
        info.setVersion(backcone.cli.Version.TEXT);
        r.setServerInfo(info);
        return CompletableFuture.completedFuture(r);
    }

    @SuppressWarnings("deprecation")
    private static @Nullable String rootOf(InitializeParams p) {
        if (p.getRootUri() != null) {
            return p.getRootUri();
        }
        return p.getRootPath() == null
                ? null
                : Uris.uri(Path.of(p.getRootPath()).toAbsolutePath().normalize());
    }

    private void root(@Nullable String uri) {
        Path path = uri == null ? null : Uris.path(uri);
        if (path != null) {
            desk.add(path);
        }
    }

    /** Reads what the client can do; returns whether places are counted in bytes. */
    private boolean capabilities(@Nullable ClientCapabilities c) {
        boolean utf8 = false;
        GeneralClientCapabilities g = c == null ? null : c.getGeneral();
        if (g != null && g.getPositionEncodings() != null) {
            List<String> all = g.getPositionEncodings();
            int u8 = all.indexOf(PositionEncodingKind.UTF8);
            int u16 = all.indexOf(PositionEncodingKind.UTF16);
            utf8 = u8 >= 0 && (u16 < 0 || u8 < u16);
        }
        TextDocumentClientCapabilities t = c == null ? null : c.getTextDocument();
        PublishDiagnosticsCapabilities d = t == null ? null : t.getPublishDiagnostics();
        WorkspaceClientCapabilities w = c == null ? null : c.getWorkspace();
        WindowClientCapabilities win = c == null ? null : c.getWindow();
        dynamicWatch = w != null
                && w.getDidChangeWatchedFiles() != null
                && Boolean.TRUE.equals(w.getDidChangeWatchedFiles().getDynamicRegistration());
        CompletionCapabilities completion = t == null ? null : t.getCompletion();
        HoverCapabilities hover = t == null ? null : t.getHover();
        boolean markdown = hover == null
                || hover.getContentFormat() == null
                || hover.getContentFormat().isEmpty()
                || hover.getContentFormat().contains(MarkupKind.MARKDOWN);
        desk.can = new Client(
                utf8,
                d != null && Boolean.TRUE.equals(d.getVersionSupport()),
                d != null && Boolean.TRUE.equals(d.getRelatedInformation()),
                d != null && Boolean.TRUE.equals(d.getCodeDescriptionSupport()),
                d != null && d.getTagSupport() != null,
                completion != null
                        && completion.getCompletionItem() != null
                        && Boolean.TRUE.equals(completion.getCompletionItem().getSnippetSupport()),
                markdown,
                false,
                win != null && Boolean.TRUE.equals(win.getWorkDoneProgress()),
                dynamicWatch,
                w != null
                        && w.getInlayHint() != null
                        && Boolean.TRUE.equals(w.getInlayHint().getRefreshSupport()),
                w != null
                        && w.getCodeLens() != null
                        && Boolean.TRUE.equals(w.getCodeLens().getRefreshSupport()),
                t == null
                        || t.getDocumentSymbol() == null
                        || Boolean.TRUE.equals(t.getDocumentSymbol().getHierarchicalDocumentSymbolSupport()),
                w != null
                        && w.getWorkspaceEdit() != null
                        && Boolean.TRUE.equals(w.getWorkspaceEdit().getDocumentChanges()));
        return utf8;
    }

    private static ServerCapabilities offers(boolean utf8) {
        ServerCapabilities s = new ServerCapabilities();
        s.setPositionEncoding(utf8 ? PositionEncodingKind.UTF8 : PositionEncodingKind.UTF16);
        TextDocumentSyncOptions sync = new TextDocumentSyncOptions();
        sync.setOpenClose(true);
        sync.setChange(TextDocumentSyncKind.Incremental);
        sync.setSave(new SaveOptions(false));
        s.setTextDocumentSync(sync);
        s.setHoverProvider(true);
        s.setCompletionProvider(new CompletionOptions(true, List.of(".", " ", "=", "\"", "/")));
        s.setSignatureHelpProvider(new SignatureHelpOptions(List.of("(", ",")));
        s.setDefinitionProvider(true);
        s.setDeclarationProvider(true);
        s.setTypeDefinitionProvider(true);
        s.setReferencesProvider(true);
        s.setDocumentHighlightProvider(true);
        s.setDocumentSymbolProvider(true);
        s.setWorkspaceSymbolProvider(true);
        s.setCodeActionProvider(new CodeActionOptions(List.of(
                CodeActionKind.QuickFix,
                CodeActionKind.Refactor,
                CodeActionKind.RefactorExtract,
                CodeActionKind.RefactorInline,
                CodeActionKind.RefactorRewrite)));
        s.setCodeLensProvider(new CodeLensOptions(true));
        s.setDocumentFormattingProvider(true);
        s.setDocumentRangeFormattingProvider(true);
        s.setDocumentOnTypeFormattingProvider(new DocumentOnTypeFormattingOptions("}", List.of("\n")));
        s.setRenameProvider(new RenameOptions(true));
        s.setFoldingRangeProvider(true);
        s.setSelectionRangeProvider(true);
        s.setDocumentLinkProvider(new DocumentLinkOptions(false));
        s.setCallHierarchyProvider(true);
        InlayHintRegistrationOptions hints = new InlayHintRegistrationOptions();
        hints.setResolveProvider(true);
        s.setInlayHintProvider(hints);
        SemanticTokensWithRegistrationOptions tokens =
                new SemanticTokensWithRegistrationOptions(new SemanticTokensLegend(Paint.TYPES, Paint.MODIFIERS));
        tokens.setFull(new SemanticTokensServerFull(true));
        tokens.setRange(true);
        s.setSemanticTokensProvider(tokens);
        s.setExecuteCommandProvider(new ExecuteCommandOptions(WorkspaceRequests.COMMANDS));
        WorkspaceServerCapabilities w = new WorkspaceServerCapabilities();
        WorkspaceFoldersOptions f = new WorkspaceFoldersOptions();
        f.setSupported(true);
        f.setChangeNotifications(true);
        w.setWorkspaceFolders(f);
        s.setWorkspace(w);
        return s;
    }

    @Override
    public void initialized(InitializedParams p) {
        LanguageClient c = desk.client;
        if (c == null) {
            return;
        }
        if (dynamicWatch) {
            DidChangeWatchedFilesRegistrationOptions o = new DidChangeWatchedFilesRegistrationOptions(List.of(
                    new FileSystemWatcher(Either.forLeft("**/*.drive")),
                    new FileSystemWatcher(Either.forLeft("**/*.method")),
                    new FileSystemWatcher(Either.forLeft("**/" + backcone.engine.diagnostics.House.NAME))));
            c.registerCapability(new RegistrationParams(
                    List.of(new Registration("backcone-files", "workspace/didChangeWatchedFiles", o))));
        }
        if (scan) {
            scan = false;
            for (Folder f : desk.folders()) {
                desk.later(() -> scan(f));
            }
        }
    }

    /** Looks at every spec of a folder, a file at a time so that what is typed comes first. */
    private void scan(Folder f) {
        List<FileId> files = f.files();
        LanguageClient c = desk.client;
        Either<String, Integer> token = files.size() > 50 && desk.can.progress() && c != null
                ? Either.forLeft("backcone-scan-" + System.identityHashCode(f))
                : null;
        if (token != null && c != null) {
            c.createProgress(new WorkDoneProgressCreateParams(token));
            WorkDoneProgressBegin b = new WorkDoneProgressBegin();
            b.setTitle("Rating the specs of this folder");
            b.setCancellable(true);
            b.setPercentage(0);
            c.notifyProgress(new ProgressParams(token, Either.forLeft(b)));
        }
        next(f, files, 0, token);
    }

    private void next(Folder f, List<FileId> files, int i, @Nullable Either<String, Integer> token) {
        LanguageClient c = desk.client;
        boolean stop = token != null && cancelled.contains(token);
        if (i >= files.size() || stop) {
            if (token != null && c != null) {
                WorkDoneProgressEnd e = new WorkDoneProgressEnd();
                e.setMessage(stop ? "stopped" : files.size() + " files");
                c.notifyProgress(new ProgressParams(token, Either.forLeft(e)));
            }
            return;
        }
        desk.closedFile(f, files.get(i));
        if (token != null && c != null && i % 25 == 0) {
            WorkDoneProgressReport r = new WorkDoneProgressReport();
            r.setPercentage(i * 100 / files.size());
            r.setMessage(files.get(i).path());
            c.notifyProgress(new ProgressParams(token, Either.forLeft(r)));
        }
        desk.later(() -> next(f, files, i + 1, token));
    }

    @Override
    public void cancelProgress(WorkDoneProgressCancelParams p) {
        if (p.getToken() != null) {
            cancelled.add(p.getToken());
        }
    }

    @Override
    public void setTrace(SetTraceParams p) {
        // nothing is traced
    }

    @Override
    public CompletableFuture<Object> shutdown() {
        ended = true;
        return CompletableFuture.completedFuture(new ArrayList<>(0)).thenApply(x -> (Object) null);
    }

    @Override
    public void exit() {
        exit.accept(ended ? 0 : 1);
    }

    @Override
    public TextDocumentService getTextDocumentService() {
        return texts;
    }

    @Override
    public WorkspaceService getWorkspaceService() {
        return workspace;
    }
}
