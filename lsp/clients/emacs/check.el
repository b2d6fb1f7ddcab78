;;; check.el --- Drives triodeck.el in a batch Emacs  -*- lexical-binding: t; -*-

;;; Commentary:

;; .ci/editor-emacs runs this with SERVER, DECK, CLEAN and the findings of
;; `triodeck lint --format json' in WANT.

;;; Code:

(require 'cl-lib)
(require 'flymake)
(require 'json)
(load (expand-file-name "triodeck.el" (file-name-directory load-file-name)) nil t)

(defvar check-limit 20 "Seconds for anything to arrive.")

(defun check-fail (format &rest args)
  "End with FORMAT and ARGS on standard error."
  (princ (concat "emacs: " (apply #'format format args) "\n") #'external-debugging-output)
  (kill-emacs 1))

(defmacro check-wait (what &rest body)
  "Wait until BODY is true, and fail with the value of WHAT if it does not become so."
  (declare (indent 1))
  `(let ((end (+ (float-time) check-limit)))
     (while (not (progn ,@body))
       (when (> (float-time) end) (check-fail "%s" ,what))
       (accept-process-output nil 0.05))))

(defvar check-heard nil "Files about which the server has published something.")
(cl-defmethod eglot-handle-notification :after
  (_server (_method (eql textDocument/publishDiagnostics)) &key uri &allow-other-keys)
  (push (file-truename (eglot--uri-to-path uri)) check-heard))

(defun check-open (path)
  "Open the deck at PATH and connect, as `eglot-ensure' does after a command."
  (find-file path)
  (unless (eq major-mode 'spice-deck-mode) (check-fail "%s opens in %s" path major-mode))
  (unless (eglot-managed-p) (apply #'eglot--connect (eglot--guess-contact)))
  (check-wait (format "no diagnostics for %s" path)
    (member (file-truename buffer-file-name) check-heard))
  (flymake-start))

(defun check-shown ()
  "What Flymake shows in this buffer: sorted lines of line, column and text."
  (sort (mapcar (lambda (d)
                  (save-excursion
                    (goto-char (flymake-diagnostic-beg d))
                    (format "%d:%d %s %s" (line-number-at-pos) (1+ (current-column))
                            (flymake-diagnostic-type d) (flymake-diagnostic-text d))))
                (flymake-diagnostics))
        #'string<))

(defun check-wanted ()
  "The findings of the command line, in the form of `check-shown'."
  (let ((types '(("error" . eglot-error) ("warning" . eglot-warning) ("note" . eglot-note))))
    (sort (mapcar (lambda (f)
                    (format "%d:%d %s triodeck [%s]: %s" (gethash "line" f) (gethash "column" f)
                            (cdr (assoc (gethash "severity" f) types)) (gethash "rule" f) (gethash "message" f)))
                  (gethash "findings" (with-temp-buffer
                                        (insert-file-contents (getenv "WANT"))
                                        (json-parse-buffer))))
          #'string<)))

(defun check-hover (pattern text)
  "Go to the end of PATTERN and expect TEXT in what ElDoc is given."
  (goto-char (point-min))
  (unless (re-search-forward pattern nil t) (check-fail "%s is not in the deck" pattern))
  (let (got)
    (eglot-hover-eldoc-function (lambda (doc &rest _) (setq got (or doc "nothing"))))
    (check-wait (format "no hover at %s" pattern) got)
    (unless (string-search text got) (check-fail "the hover does not say\n%s\nbut\n%s" text got))))

(setq triodeck-command (list (getenv "SERVER") "lsp"))

(check-open (getenv "DECK"))
(let ((wanted (check-wanted)))
  (unless wanted (check-fail "the command line has no findings to compare with"))
  (check-wait (format "diagnostics are\n%s\nand not\n%s" (string-join (check-shown) "\n") (string-join wanted "\n"))
    (equal (check-shown) wanted)))

(check-hover "^M_s" "M_sw · NMOS · nch, level 1 · W/L = 4 µm / 180 nm")
(check-hover "^M_s" "deep triode  116–229 Ω")
(check-hover "^M_sw +s" "0.095–0.595 V  annotated at line ")

;; A mended line loses its finding.
(goto-char (point-min))
(unless (search-forward "nch_lvt" nil t) (check-fail "nch_lvt is not in the deck"))
(replace-match "nch" t t)
(eglot--signal-textDocument/didChange)
(check-wait (format "the finding did not go with its cause:\n%s" (string-join (check-shown) "\n"))
  (not (cl-some (lambda (line) (string-search "nch_lvt" line)) (check-shown))))
(set-buffer-modified-p nil)

(check-open (getenv "CLEAN"))
(when (check-shown) (check-fail "a clean deck has findings:\n%s" (string-join (check-shown) "\n")))

(princ "emacs: diagnostics, hover and edit arrive\n")
(kill-emacs 0)

;;; check.el ends here
