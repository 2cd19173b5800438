"""The look of the page: one narrow column of inputs, one white panel, few lines."""

import streamlit as st

_CSS = """
.block-container, [data-testid="stMainBlockContainer"] { padding: 0.5rem 1.25rem 2rem 1.25rem; max-width: 1500px; }
[data-testid="stHeader"] { display: none; }
.st-key-inputs, .st-key-inputs [data-testid="stVerticalBlock"] { gap: 0.35rem; }
[data-testid="stColumn"]:has(.st-key-inputs) { flex: 0 0 324px; width: 324px; min-width: 0; }
[data-testid="stColumn"]:has(.st-key-panel) { flex: 1 1 640px; min-width: 0; max-width: 1160px; }
@media (max-width: 1040px) {
  [data-testid="stHorizontalBlock"]:has(> [data-testid="stColumn"] .st-key-inputs) { flex-direction: column; }
  [data-testid="stColumn"]:has(.st-key-inputs), [data-testid="stColumn"]:has(.st-key-panel) {
    flex: 1 1 auto; width: 100%; max-width: none;
  }
}
.st-key-inputs label p, .ml-label { font-size: 14px; }
.st-key-inputs label { min-height: 1.2rem; margin-bottom: 1px; }
.ml-saved, .ml-counts { font-size: 13px; }
.ml-counts { margin: 0; line-height: 18px; }
.ml-complaint, .ml-notice, .ml-status { font-size: 14px; margin: 0; line-height: 20px; overflow-wrap: anywhere; }
.ml-complaint { border-left: 3px solid currentColor; padding-left: 8px; }
.ml-notice { border-left: 1px dashed currentColor; padding-left: 10px; }
.ml-empty { font-size: 17px; line-height: 26px; margin: 0 0 8px 0; }
.st-key-openers { align-items: center; }
.st-key-openers > div { width: auto !important; flex: 0 0 auto; }
[data-testid="stFileUploaderDropzone"] { padding: 0; border: none; background: none; min-height: 0; gap: 0; }
[data-testid="stFileUploaderDropzoneInstructions"], [data-testid="stFileUploader"] > label { display: none; }
.st-key-readings_file [data-testid="stFileChip"]:not([aria-invalid="true"]),
.st-key-readings_file:has([data-testid="stFileChip"]:not([aria-invalid="true"])) [aria-invalid="true"] { display: none; }
.st-key-readings_file button[aria-label="Add files"] {
  width: auto; min-height: 37px; padding: 0 12px; border: 1px solid; border-radius: 2px; font-size: 14px; color: inherit;
}
.st-key-readings_file [data-testid="stFileChips"] { gap: 0; margin: 0; padding: 0; }
.st-key-readings_file button[aria-label="Add files"] > * { display: none; }
.st-key-readings_file button[aria-label="Add files"]::after { content: "Upload"; }
.st-key-readings_file:has([aria-invalid="true"]):not(:has([data-testid="stFileChip"]:not([aria-invalid="true"]))) {
  flex: 1 0 100% !important;
}
.st-key-readings_file [aria-invalid="true"], .st-key-readings_file [aria-invalid="true"] ~ * { max-width: none; }
.st-key-readings_file [data-testid="stFileChips"] *:has(> [aria-invalid="true"]) { max-width: none; width: 100% !important; }
.st-key-readings_file [aria-invalid="true"] { flex-wrap: wrap; height: auto; width: 100%; }
.st-key-readings_file [aria-invalid="true"] [role="alert"] {
  position: static; width: 100%; height: auto; clip: auto; clip-path: none; margin: 0; padding: 4px; white-space: normal;
  overflow: visible; font-size: 14px; line-height: 20px;
}
.st-key-readings_file [aria-invalid="true"] [role="alert"]::after {
  content: " Save the sheet with the readings as a file of its own, or paste the column.";
}
.st-key-readings_file, .st-key-readings_file [data-testid="stFileUploader"] { width: auto !important; }
.st-key-focus { position: absolute; height: 0; overflow: hidden; }
.st-key-label_row { gap: 0.5rem; min-height: 24px; }
.st-key-label_row > div:last-child { margin-left: auto; }
.st-key-label_row button, .st-key-put_back button { min-height: 22px; padding: 0; font-size: 13px; }
.st-key-label_row button p, .st-key-put_back button p { font-size: 13px; text-decoration: underline; }

.st-key-panel {
  background: #fff; color: #000; border: 1px solid #000; padding: 14px 18px 10px 18px; gap: 6px;
  color-scheme: light;
}
.st-key-panel * { color: #000; }
.ml-head { display: flex; justify-content: space-between; align-items: baseline; gap: 24px; }
.ml-title, .ml-verdict { font-size: 20px; line-height: 26px; font-weight: 600; overflow-wrap: anywhere; }
.ml-verdict { text-align: right; }
.ml-sentence { font-size: 17px; line-height: 24px; margin: 0; overflow-wrap: anywhere; }
.ml-table { border-collapse: collapse; width: 100%; font-size: 13px; line-height: 18px; }
.ml-table th { text-align: left; font-weight: 400; padding: 4px 8px 4px 0; width: 38%; white-space: nowrap; }
.st-key-panel .ml-table th { color: #444; }
.ml-table td { padding: 4px 0; overflow-wrap: anywhere; }
.ml-table tr { border-bottom: 1px solid #ccc; }
.ml-table tr:last-child { border-bottom: none; }
.ml-foot { font-size: 12px; line-height: 16px; margin: 0; overflow-wrap: anywhere; }
.st-key-panel .ml-foot { color: #444; }

.st-key-under_panel { align-items: center; }
.ml-scroll { overflow: auto; }
.ml-list { border-collapse: collapse; font-size: 14px; line-height: 20px; }
.ml-list th { text-align: left; font-weight: 600; padding: 3px 18px 3px 0; position: sticky; top: 0;
  background: var(--ml-page, inherit); }
.ml-list td { padding: 3px 18px 3px 0; vertical-align: top; overflow-wrap: anywhere; }
.ml-list tr { border-bottom: 1px solid #9a9a96; }
.ml-text p { font-size: 14px; line-height: 20px; margin: 0 0 4px 0; max-width: 75em; overflow-wrap: anywhere; }
.ml-h { font-size: 15px; line-height: 20px; font-weight: 600; margin: 8px 0 2px 0; padding: 0; }
.st-key-lower_part [data-testid="stVerticalBlock"] { gap: 0.5rem; }

@media print {
  body * { visibility: hidden; }
  .st-key-panel, .st-key-panel * { visibility: visible; }
  .st-key-panel { position: absolute; left: 0; top: 0; width: 100%; }
}
"""


def apply() -> None:
    """Put the style sheet on the page."""
    st.html(f"<style>{_CSS}</style>")
