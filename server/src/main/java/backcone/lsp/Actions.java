package backcone.lsp;

import backcone.engine.fixes.Fix;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.eclipse.lsp4j.CodeAction;
import org.eclipse.lsp4j.CodeActionKind;
import org.eclipse.lsp4j.CodeActionParams;
import org.eclipse.lsp4j.Diagnostic;
import org.eclipse.lsp4j.TextEdit;
import org.eclipse.lsp4j.WorkspaceEdit;
import org.jspecify.annotations.Nullable;

/** Fixes and refactorings at a place. */
final class Actions {
    private Actions() {}

    static List<CodeAction> of(Desk.Asked q, CodeActionParams p) {
        int from = q.lines().offset(p.getRange().getStart());
        int to = Math.max(from, q.lines().offset(p.getRange().getEnd()));
        List<CodeAction> out = new ArrayList<>();
        if (q.doc().id.isHandbook()) {
            return out;
        }
        boolean preferred = false;
        for (Fix f : q.doc().folder.fixes(q.analysis(), new Span(from, to))) {
            CodeAction a = action(q, f, p);
            if (f.preferred() && !preferred) {
                a.setIsPreferred(true);
                preferred = true;
            }
            out.add(a);
        }
        return wanted(out, p);
    }

    private static CodeAction action(Desk.Asked q, Fix f, CodeActionParams p) {
        CodeAction a = new CodeAction(f.title());
        a.setKind(
                switch (f.kind()) {
                    case QUICK_FIX -> CodeActionKind.QuickFix;
                    case EXTRACT -> CodeActionKind.RefactorExtract;
                    case INLINE -> CodeActionKind.RefactorInline;
                    case REWRITE -> CodeActionKind.RefactorRewrite;
                });
        List<Diagnostic> mended = new ArrayList<>();
        List<Diagnostic> around = p.getContext() == null ? null : p.getContext().getDiagnostics();
        if (around != null) {
            for (Diagnostic d : around) {
                if (d.getCode() != null
                        && d.getCode().isLeft()
                        && f.codes().contains(d.getCode().getLeft())) {
                    mended.add(d);
                }
            }
        }
        if (!mended.isEmpty()) {
            a.setDiagnostics(mended);
        }
        Map<String, List<TextEdit>> changes = new LinkedHashMap<>();
        for (backcone.engine.fixes.TextEdit e : f.edits()) {
            FileId file = e.file();
            Lines lines = file.equals(q.doc().id) ? q.lines() : q.desk().lines(q.doc().folder, file);
            changes.computeIfAbsent(q.desk().uri(q.doc().folder, file), k -> new ArrayList<>())
                    .add(new TextEdit(lines.range(e.span()), e.text()));
        }
        a.setEdit(new WorkspaceEdit(changes));
        return a;
    }

    /** Only the kinds that the client asks for. */
    private static List<CodeAction> wanted(List<CodeAction> all, CodeActionParams p) {
        @Nullable
        List<String> only = p.getContext() == null ? null : p.getContext().getOnly();
        if (only == null || only.isEmpty()) {
            return all;
        }
        List<CodeAction> out = new ArrayList<>();
        for (CodeAction a : all) {
            for (String k : only) {
                if (a.getKind().equals(k) || a.getKind().startsWith(k + ".")) {
                    out.add(a);
                    break;
                }
            }
        }
        return out;
    }
}
