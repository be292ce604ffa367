package backcone.lsp;

/** What the client can do. */
record Client(
        boolean utf8,
        boolean versions,
        boolean related,
        boolean codeDescription,
        boolean tags,
        boolean snippets,
        boolean markdown,
        boolean pullOnly,
        boolean progress,
        boolean watches,
        boolean hintRefresh,
        boolean lensRefresh,
        boolean hierarchicalSymbols,
        boolean documentChanges) {
    static final Client NOTHING =
            new Client(false, false, false, false, false, false, true, false, false, false, false, false, true, false);
}
