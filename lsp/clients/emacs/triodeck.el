;;; triodeck.el --- SPICE decks with triodeck, over eglot  -*- lexical-binding: t; -*-

;; Package-Requires: ((emacs "28.1") (eglot "1.9"))

;;; Commentary:

;; A major mode for SPICE decks that starts triodeck's language server:
;;
;;   (load "/path/to/triodeck/lsp/clients/emacs/triodeck.el")
;;
;; See README.md beside this file.

;;; Code:

(require 'package)
(unless (locate-library "eglot") (package-initialize))
(require 'eglot)

(defgroup triodeck nil "SPICE decks with triodeck." :group 'tools)

(defcustom triodeck-command '("triodeck" "lsp")
  "How the language server is started."
  :type '(repeat string))

(defvar spice-deck-font-lock-keywords
  '(("^[ \t]*\\*@.*" 0 font-lock-doc-face t)
    ("[;$]@.*" 0 font-lock-doc-face t)
    ("^[ \t]*\\*\\([^@\n].*\\)?$" 0 font-lock-comment-face t)
    ("[ \t]\\([;$]\\([^@\n].*\\)?\\)$" 1 font-lock-comment-face t)
    ("^[ \t]*\\(\\.[a-z]+\\)" 1 font-lock-keyword-face)
    ("^\\([a-z][^ \t\n]*\\)" 1 font-lock-variable-name-face)
    ("\\_<\\([a-z_0-9]+\\)[ \t]*=" 1 font-lock-constant-face))
  "What is coloured in a deck: annotations, comments, directives, names.")

;;;###autoload
(define-derived-mode spice-deck-mode prog-mode "SPICE"
  "Major mode for SPICE decks."
  (setq-local comment-start "* ")
  (setq-local comment-start-skip "\\*+[ \t]*")
  (setq-local font-lock-defaults '(spice-deck-font-lock-keywords t t)))

;;;###autoload
(add-to-list 'auto-mode-alist
             '("\\.\\(?:sp\\|spi\\|spice\\|cir\\|ckt\\|net\\|cdl\\|lib\\|mod\\)\\'" . spice-deck-mode))

;; A function, so that `triodeck-command' may be set at any time.
(add-to-list 'eglot-server-programs
             (cons 'spice-deck-mode (lambda (&optional _interactive) triodeck-command)))

(add-hook 'spice-deck-mode-hook #'eglot-ensure)

(provide 'triodeck)
;;; triodeck.el ends here
